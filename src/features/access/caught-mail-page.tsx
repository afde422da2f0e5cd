import { useQuery } from '@tanstack/react-query';
import { Link } from 'react-router';
import type { CaughtMailView } from '#shared/views/site-view.ts';
import { PageHead } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { api } from '../../lib/api-client.ts';
import { formatInstant } from '../../lib/format-quantity.ts';

/** What the local mail catcher received instead of sending it on. */
export function CaughtMailPage() {
  const mail = useQuery({
    queryKey: ['caught-mail'],
    queryFn: ({ signal }) => api.get<CaughtMailView[]>('/caught-mail', signal),
    refetchInterval: 3_000,
  });
  return (
    <main className="max-w-[860px] mx-auto px-4 py-10">
      <PageHead
        title="Caught mail"
        sentence="No mail server is set, so mail stays here and nothing is sent. Anyone who can open this page can use the links in it: set SMTP_URL before real people work with it."
        crumb={<Link to="/">Tallyweir</Link>}
      />
      <Viewed query={mail}>
        {(rows) =>
          rows.length === 0 ? (
            <Empty>No mail yet. An invitation, a new password or an exceedance will appear here.</Empty>
          ) : (
            <ul className="grid gap-4 list-none">
              {rows.map((row) => (
                <li key={row.id} className="sheet pad">
                  <h2 className="text-base">{row.subject}</h2>
                  <p className="hint">
                    to {row.to}, {formatInstant(row.caughtAt)}
                  </p>
                  <div className="mt-3 whitespace-pre-wrap break-all">
                    {row.text.split(/(https?:\/\/\S+)/).map((part, index) =>
                      index % 2 ? (
                        <a key={part} href={part}>
                          {part}
                        </a>
                      ) : (
                        part
                      ),
                    )}
                  </div>
                </li>
              ))}
            </ul>
          )
        }
      </Viewed>
    </main>
  );
}
