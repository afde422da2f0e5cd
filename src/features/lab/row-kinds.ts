import type { LabImportView } from '#shared/views/lab-view.ts';
import type { Look } from '../../components/words.tsx';

export type Row = LabImportView['rows'][number];

/** Kind of a row for the strip, the counts and the filter: one set of words. */
export type Kind = 'new' | 'noticed' | 'changed' | 'held' | 'left out';

export const kindOf = (row: Row): Kind =>
  row.state === 'held'
    ? 'held'
    : row.state === 'skipped'
      ? 'left out'
      : row.supersedesId
        ? 'changed'
        : row.state === 'warned'
          ? 'noticed'
          : 'new';

export const kinds: Record<Kind, { look: Look; fill: string; stroke: string; mark: string; words: string }> =
  {
    new: {
      look: 'good',
      fill: 'var(--color-s-effluent)',
      stroke: 'var(--color-s-effluent)',
      mark: '',
      words: 'new results',
    },
    noticed: {
      look: 'note',
      fill: '#fff',
      stroke: 'var(--color-s-effluent)',
      mark: '•',
      words: 'new, with something to notice',
    },
    changed: {
      look: 'ask',
      fill: '#fff',
      stroke: 'var(--color-s-effluent)',
      mark: '/',
      words: 'changed values',
    },
    held: {
      look: 'ask',
      fill: 'var(--color-warn-bg)',
      stroke: 'var(--color-warn)',
      mark: '?',
      words: 'held',
    },
    'left out': {
      look: 'open',
      fill: 'var(--color-sunken)',
      stroke: 'var(--color-edge)',
      mark: '',
      words: 'not written: quality control or already here',
    },
  };
