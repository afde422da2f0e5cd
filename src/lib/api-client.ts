import type { ProblemDocument } from '#shared/problems.ts';
import { newId } from './new-id.ts';

/** A failure the server answered with, or none at all when it could not be reached. */
export class ApiProblem extends Error {
  readonly document: ProblemDocument;

  constructor(document: ProblemDocument) {
    super(document.detail);
    this.document = document;
  }

  get kind(): string {
    return this.document.type.replace('/problems/', '');
  }
}

const unreachable: ProblemDocument = {
  type: '/problems/unreachable',
  title: 'The server cannot be reached',
  status: 0,
  detail: 'The server cannot be reached. What you entered is still here; try again when there is a signal.',
};

async function request<T>(method: string, path: string, init: RequestInit): Promise<T> {
  let response: Response;
  try {
    response = await fetch(`/api/v1${path}`, { ...init, method, credentials: 'same-origin' });
  } catch (error) {
    if (error instanceof DOMException && error.name === 'AbortError') throw error;
    throw new ApiProblem(unreachable);
  }
  if (response.status === 204) return undefined as T;
  const isJson = /json/.test(response.headers.get('content-type') ?? '');
  if (!isJson) throw new ApiProblem(unreachable);
  const body: unknown = await response.json();
  if (!response.ok) throw new ApiProblem(body as ProblemDocument);
  return body as T;
}

export const api = {
  get: <T>(path: string, signal?: AbortSignal) => request<T>('GET', path, signal ? { signal } : {}),
  /** A write; the key makes a repeat harmless. */
  send: <T>(
    method: 'POST' | 'PUT',
    path: string,
    body: unknown,
    options: { key?: string; headers?: Record<string, string> } = {},
  ) =>
    request<T>(method, path, {
      body: JSON.stringify(body),
      headers: {
        'content-type': 'application/json',
        'idempotency-key': options.key ?? newId(),
        ...options.headers,
      },
    }),
  upload: <T>(path: string, fields: Record<string, string>, file: File) => {
    const form = new FormData();
    for (const [name, value] of Object.entries(fields)) form.set(name, value);
    form.set('file', file);
    return request<T>('POST', path, { body: form, headers: { 'idempotency-key': newId() } });
  },
};
