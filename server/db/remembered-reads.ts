import type { Transaction } from './transaction.ts';

const answers = new WeakMap<Transaction, Map<string, Promise<unknown>>>();

/** From here on this transaction only reads, so that an answer of it can be used again. */
export const rememberReads = (tx: Transaction): void => {
  answers.set(tx, new Map());
};

/** The answer of a read, asked once per transaction that only reads; every time in one that writes. */
export function remembered<T>(tx: Transaction, key: string, read: () => Promise<T>): Promise<T> {
  const known = answers.get(tx);
  if (!known) return read();
  const before = known.get(key) as Promise<T> | undefined;
  if (before) return before;
  const made = read();
  known.set(key, made);
  return made;
}
