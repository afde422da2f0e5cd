/**
 * Every kind of failure the API answers with, as application/problem+json (RFC 9457, Nottingham, Wilde, Dalal 2023).
 * The key is the last part of the problem's `type`; the client decides by it, never by the words.
 */
export const problemKinds = {
  'fields-need-another-look': { status: 422, title: 'Some answers need another look' },
  'not-signed-in': { status: 401, title: 'You are not signed in' },
  'sign-in-failed': { status: 401, title: 'The e-mail address and password do not match' },
  'not-allowed': { status: 403, title: 'Your role cannot do this here' },
  'request-from-elsewhere': { status: 403, title: 'This request came from another site' },
  'not-found': { status: 404, title: 'There is nothing at this address' },
  'too-many-tries': { status: 429, title: 'Too many tries' },
  'key-missing': { status: 400, title: 'A write needs an Idempotency-Key' },
  'key-used-for-other-content': { status: 422, title: 'This key was used for something else' },
  'still-being-written': { status: 409, title: 'The same request is still being written' },
  'id-used-for-other-content': { status: 409, title: 'This id already belongs to another record' },
  'changed-meanwhile': { status: 412, title: 'Somebody changed this meanwhile' },
  'month-is-closed': { status: 409, title: 'The month is closed' },
  'not-ready': { status: 409, title: 'Something has to be settled first' },
  'already-done': { status: 409, title: 'This was done already' },
  'link-ended': { status: 410, title: 'This link can no longer be used' },
  'file-too-big': { status: 413, title: 'The file is too big' },
  'file-not-readable': { status: 422, title: 'The file could not be read' },
  'balance-refused': { status: 422, title: 'The balance cannot be computed' },
  busy: { status: 409, title: 'Somebody else is writing here' },
  'database-away': { status: 503, title: 'The database cannot be reached' },
  'too-slow': { status: 503, title: 'This took too long' },
  unexpected: { status: 500, title: 'Something went wrong here' },
} as const;

export type ProblemKind = keyof typeof problemKinds;

export interface FieldProblem {
  /** JSON pointer to the field, e.g. `/body/email`. */
  pointer: string;
  detail: string;
}

export interface ProblemDocument {
  type: string;
  title: string;
  status: number;
  detail: string;
  instance?: string | undefined;
  errors?: FieldProblem[] | undefined;
}

/** A failure that a person can be told about. */
export class Problem extends Error {
  readonly kind: ProblemKind;
  readonly errors: FieldProblem[] | undefined;

  constructor(kind: ProblemKind, detail: string, errors?: FieldProblem[]) {
    super(detail);
    this.name = 'Problem';
    this.kind = kind;
    this.errors = errors;
  }

  toDocument(instance?: string): ProblemDocument {
    const { status, title } = problemKinds[this.kind];
    return {
      type: `/problems/${this.kind}`,
      title,
      status,
      detail: this.message,
      instance,
      errors: this.errors,
    };
  }
}

/** One wrong field, with the sentence that stands beside it. */
export const fieldProblem = (pointer: string, detail: string): Problem =>
  new Problem('fields-need-another-look', detail, [{ pointer, detail }]);
