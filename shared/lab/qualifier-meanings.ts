/** What a laboratory's letter can mean; each laboratory has its own table of letters. */
export const qualifierMeanings = [
  'non-detect',
  'estimated-below-reporting',
  'above-range',
  'in-blank',
  'diluted',
  'holding-time',
  'rejected',
  'other',
] as const;
export type QualifierMeaning = (typeof qualifierMeanings)[number];

export const qualifierMeaningNames: Record<QualifierMeaning, string> = {
  'non-detect': 'not detected',
  'estimated-below-reporting': 'estimated, below the reporting limit',
  'above-range': 'above the calibrated range',
  'in-blank': 'found in the blank too',
  diluted: 'diluted',
  'holding-time': 'holding time exceeded',
  rejected: 'rejected by the laboratory',
  other: 'something else, kept as a letter',
};
