import { openDB, type DBSchema } from 'idb';
import { api, ApiProblem } from './api-client.ts';

/** What became of an entry: safe on the device, sent, or in need of an answer. */
export type OutboxState = 'waiting' | 'needs-answer';

export interface OutboxItem {
  /** Id of the record, and the key that makes sending it again harmless. */
  id: string;
  siteId: string;
  personId: string;
  path: string;
  body: Record<string, unknown>;
  label: string;
  savedAt: string;
  state: OutboxState;
  problem: string | null;
}

interface OutboxSchema extends DBSchema {
  items: { key: string; value: OutboxItem };
}

const open = () =>
  openDB<OutboxSchema>('tallyweir-outbox', 1, {
    upgrade: (database) => void database.createObjectStore('items', { keyPath: 'id' }),
  });

const listeners = new Set<() => void>();
const tell = () => listeners.forEach((listener) => listener());
export const onOutboxChange = (listener: () => void): (() => void) => {
  listeners.add(listener);
  return () => listeners.delete(listener);
};

export async function listOutbox(siteId: string): Promise<OutboxItem[]> {
  const items = await (await open()).getAll('items');
  return items.filter((item) => item.siteId === siteId).sort((a, b) => (a.savedAt < b.savedAt ? -1 : 1));
}

export async function countWaiting(): Promise<number> {
  return (await open()).count('items');
}

/** Puts an entry on the device before any network is tried. */
export async function keepInOutbox(item: OutboxItem): Promise<void> {
  await (await open()).put('items', item);
  void navigator.storage?.persist?.();
  tell();
}

export async function dropFromOutbox(id: string): Promise<void> {
  await (await open()).delete('items', id);
  tell();
}

export type SendResult =
  { kind: 'sent'; answer: unknown } | { kind: 'waiting' } | { kind: 'needs-answer'; problem: ApiProblem };

/** Sends one entry. Only an answer from the server ends its wait: an unreachable or busy server leaves it here. */
export async function sendFromOutbox(item: OutboxItem): Promise<SendResult> {
  try {
    const answer = await api.send('POST', `/sites/${item.siteId}${item.path}`, item.body, { key: item.id });
    await dropFromOutbox(item.id);
    return { kind: 'sent', answer };
  } catch (error) {
    if (!(error instanceof ApiProblem)) throw error;
    const { status } = error.document;
    if (
      status === 0 ||
      status >= 500 ||
      status === 401 ||
      error.kind === 'still-being-written' ||
      error.kind === 'busy'
    ) {
      tell();
      return { kind: 'waiting' };
    }
    await (await open()).put('items', { ...item, state: 'needs-answer', problem: error.document.detail });
    tell();
    return { kind: 'needs-answer', problem: error };
  }
}

/** Sends all that waits, in the order it was saved. */
export async function flushOutbox(siteId: string, personId: string): Promise<number> {
  let sent = 0;
  for (const item of await listOutbox(siteId)) {
    if (item.state !== 'waiting' || item.personId !== personId) continue;
    if ((await sendFromOutbox(item)).kind === 'sent') sent += 1;
  }
  return sent;
}
