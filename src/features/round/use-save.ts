import { useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import type { ReadingCheck } from '#shared/ledger/check-reading.ts';
import { newId } from '../../lib/new-id.ts';
import { keepInOutbox, sendFromOutbox, type OutboxItem } from '../../lib/outbox.ts';
import { usePlace } from '../../app/place.ts';

export interface SavedAnswer {
  id: string;
  state: 'stored' | 'held';
  check?: ReadingCheck;
  warning?: string | null;
}

export type SaveState =
  | { kind: 'idle' }
  | { kind: 'saving' }
  | { kind: 'saved-here' }
  | { kind: 'sent'; at: string; answer: SavedAnswer }
  | { kind: 'problem'; text: string };

/**
 * Saves an entry: first on this device, then to the server.
 * @returns the server's answer; 'kept' while it waits on this device; null when it was refused
 */
export function useSave(path: string, label: string) {
  const { site, me } = usePlace();
  const client = useQueryClient();
  const [state, setState] = useState<SaveState>({ kind: 'idle' });
  const save = async (body: Record<string, unknown>): Promise<SavedAnswer | 'kept' | null> => {
    if (state.kind === 'saving') return null;
    setState({ kind: 'saving' });
    const id = newId();
    const item: OutboxItem = {
      id,
      siteId: site.id,
      personId: me.personId,
      path,
      body: { ...body, id, deviceId: 'browser' },
      label,
      savedAt: new Date().toISOString(),
      state: 'waiting',
      problem: null,
    };
    await keepInOutbox(item).catch(() => undefined);
    const result = await sendFromOutbox(item);
    if (result.kind === 'waiting') {
      setState({ kind: 'saved-here' });
      return 'kept';
    }
    if (result.kind === 'needs-answer') {
      // The form is still open with what was typed, so the answer is given here.
      const { dropFromOutbox } = await import('../../lib/outbox.ts');
      await dropFromOutbox(id);
      const { errors, detail } = result.problem.document;
      setState({ kind: 'problem', text: errors?.map((one) => one.detail).join(' ') || detail });
      return null;
    }
    const answer = result.answer as SavedAnswer;
    setState({ kind: 'sent', at: new Date().toTimeString().slice(0, 5), answer });
    await client.invalidateQueries({ queryKey: ['site', site.id] });
    return answer;
  };
  return { state, save, refuse: (text: string) => setState({ kind: 'problem', text }) };
}
