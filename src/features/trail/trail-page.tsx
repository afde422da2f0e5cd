import { useInfiniteQuery } from '@tanstack/react-query';
import { Link, useSearchParams } from 'react-router';
import type { TrailCheckView, TrailView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, ScrollBox } from '../../components/page.tsx';
import { Failed, Loading, Viewed } from '../../components/state.tsx';
import { Word } from '../../components/words.tsx';
import { api } from '../../lib/api-client.ts';
import { formatInstant } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';

type Row = TrailView['rows'][number];

function Values({ row }: { row: Row }) {
  if (row.before === null && row.after === null) return null;
  const block = (title: string, value: unknown) =>
    value !== null &&
    value !== undefined && (
      <div>
        <p className="font-medium">{title}</p>
        <pre className="text-xs whitespace-pre-wrap break-all bg-sunken p-2 rounded-sm">
          {JSON.stringify(value, null, 1)}
        </pre>
      </div>
    );
  return (
    <details>
      <summary className="cursor-pointer text-primary">before and after</summary>
      <div className="grid gap-2 mt-2 max-w-[60ch]">
        {block('Before', row.before)}
        {block('After', row.after)}
      </div>
    </details>
  );
}

function Chain() {
  const { site } = usePlace();
  const query = useRecord<TrailCheckView>(site.id, '/trail-check');
  return (
    <div className="sheet pad mb-6">
      <Viewed query={query}>
        {(view) => (
          <>
            <p>
              <Word look={view.firstFault ? 'bad' : 'good'}>
                {view.firstFault ? 'The chain is broken:' : 'The chain holds:'}
              </Word>{' '}
              {view.firstFault ??
                `${view.sealedCount} changes of the organisation are chained by SHA-256${view.unsealedCount ? `, ${view.unsealedCount} are waiting for the next second’s seal` : ''}.`}
            </p>
            <p className="hint break-all">
              Head: {view.headHash}. It is printed in every issued report, so that an old report proves the
              trail behind it. Numbers run through all sites of the organisation, so one site’s list has gaps.
            </p>
          </>
        )}
      </Viewed>
    </div>
  );
}

/** Who changed what, when and why; the newest first. */
export function TrailPage() {
  const { site } = usePlace();
  const [search, setSearch] = useSearchParams();
  const subject = search.get('subject');
  const query = useInfiniteQuery({
    queryKey: ['site', site.id, 'trail', subject],
    initialPageParam: null as number | null,
    getNextPageParam: (last: TrailView) => last.nextBefore,
    queryFn: ({ pageParam, signal }) =>
      api.get<TrailView>(
        `/sites/${site.id}/trail?${new URLSearchParams({ ...(subject ? { subject } : {}), ...(pageParam === null ? {} : { before: String(pageParam) }) })}`,
        signal,
      ),
  });
  const rows = query.data?.pages.flatMap((page) => page.rows) ?? [];
  return (
    <>
      <PageHead
        title="Trail"
        sentence={
          subject ? (
            <>
              Changes of one record only.{' '}
              <button type="button" className="link" onClick={() => setSearch({})}>
                Show all changes
              </button>
            </>
          ) : (
            'Every change of this site: who, when, what, and why. Rows are only ever added.'
          )
        }
      />
      <Chain />
      {query.isPending && <Loading />}
      {query.isError && <Failed error={query.error} onRetry={() => void query.refetch()} />}
      {query.data && (
        <ScrollBox label="Changes, newest first">
          <table className="tbl tbl-tight">
            <caption className="sr-only">Changes, newest first</caption>
            <thead>
              <tr>
                <th scope="col" className="r hidden sm:table-cell">
                  No.
                </th>
                <th scope="col">When and who</th>
                <th scope="col">What</th>
              </tr>
            </thead>
            <tbody>
              {rows.map((row) => (
                <tr key={row.id}>
                  <td className="r text-muted hidden sm:table-cell">{row.sequence}</td>
                  <td className="sm:whitespace-nowrap">
                    {formatInstant(row.at)}
                    <span className="hint block">{row.by}</span>
                  </td>
                  <td className="sm:w-2/3">
                    {row.sentence}
                    {row.reason && <span className="hint block">Reason: {row.reason}</span>}
                    <div className="flex flex-wrap gap-x-5">
                      <Values row={row} />
                      {!subject && (
                        <Link
                          to={`?subject=${row.subjectId}`}
                          aria-label={`All changes of this record: ${row.sentence}`}
                        >
                          all changes of this record
                        </Link>
                      )}
                    </div>
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollBox>
      )}
      {query.hasNextPage && (
        <p className="mt-4">
          <button type="button" className="btn btn-second" onClick={() => void query.fetchNextPage()}>
            Show earlier changes
          </button>
        </p>
      )}
    </>
  );
}
