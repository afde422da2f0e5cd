/** Something about the data that a person should know: a value, never an exception. */
export interface Finding {
  code: string;
  severity: 'stops' | 'ask' | 'note';
  /** Day or month it is about. */
  when?: string;
  subjectId?: string;
  /** Signed difference and tolerance, in the unit, when the finding compares two numbers. */
  difference?: number;
  tolerance?: number;
  unit?: string;
  /** A sentence a site manager can read. */
  sentence: string;
}
