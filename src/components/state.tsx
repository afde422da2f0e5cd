import type { UseQueryResult } from '@tanstack/react-query';
import type { ReactNode } from 'react';
import { ApiProblem } from '../lib/api-client.ts';

/** Grey bands in the shape of what will come; no spinner alone. */
export function Loading() {
  return (
    <div role="status" aria-label="Loading" className="grid gap-3">
      {[60, 90, 75].map((width) => (
        <div key={width} className="h-11 bg-sunken rounded-sm" style={{ width: `${width}%` }} />
      ))}
    </div>
  );
}

export function Failed({ error, onRetry }: { error: unknown; onRetry?: () => void }) {
  const problem = error instanceof ApiProblem ? error.document : null;
  return (
    <div role="alert" className="box box-error grid gap-2">
      <p className="font-semibold">{problem?.title ?? 'Something went wrong on this page'}</p>
      <p>{problem?.detail ?? 'Nothing was lost. Load the page again.'}</p>
      {onRetry && (
        <p>
          <button type="button" className="btn btn-second" onClick={onRetry}>
            Try again
          </button>
        </p>
      )}
    </div>
  );
}

/** The four states of a view: loading, failed with a retry, data; empty is the page's own. */
export function Viewed<T>({
  query,
  children,
}: {
  query: UseQueryResult<T>;
  children: (view: T) => ReactNode;
}) {
  if (query.isPending) return <Loading />;
  if (query.isError) return <Failed error={query.error} onRetry={() => void query.refetch()} />;
  return <>{children(query.data)}</>;
}

/** Nothing there yet, and what to do first. */
export function Empty({ children }: { children: ReactNode }) {
  return <div className="sheet pad text-muted">{children}</div>;
}
