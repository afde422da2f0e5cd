import { useQuery } from '@tanstack/react-query';
import { Link, Navigate } from 'react-router';
import { isAllowed } from '#shared/permissions.ts';
import { PageHead } from '../components/page.tsx';
import { Failed, Loading } from '../components/state.tsx';
import { SignOut } from '../features/access/sign-out.tsx';
import { ApiProblem } from '../lib/api-client.ts';
import { meQuery } from '../lib/record.ts';
import { areaPath } from './paths.ts';

/** Sends a person to their one site and their own work there; offers the list when there are several. */
export function StartPage() {
  const me = useQuery(meQuery);
  if (me.isPending)
    return (
      <main className="p-8">
        <Loading />
      </main>
    );
  if (me.isError) {
    return me.error instanceof ApiProblem && me.error.kind === 'not-signed-in' ? (
      <Navigate to="/sign-in" replace />
    ) : (
      <main className="p-8">
        <Failed error={me.error} onRetry={() => void me.refetch()} />
      </main>
    );
  }
  const { sites, roles, displayName } = me.data;
  const home = (site: (typeof sites)[number]) => {
    const area = site.roles.includes('operator')
      ? 'round'
      : isAllowed(site.roles, 'read:record')
        ? 'month'
        : 'lab';
    return areaPath(site.slug, area, site.today.slice(0, 7), site.today);
  };
  const mayCreate = isAllowed(roles, 'create:site');
  if (sites.length === 1 && !mayCreate) return <Navigate to={home(sites[0]!)} replace />;
  return (
    <main className="max-w-[760px] mx-auto px-4 py-10">
      <PageHead
        title="Your sites"
        sentence={
          sites.length
            ? `${displayName}, choose where to go on.`
            : mayCreate
              ? 'There is no site yet. Make the first one: name, place and time zone.'
              : 'You have no role at a site yet. Ask your administrator.'
        }
      />
      <ul className="sheet lines px-4 list-none">
        {sites.map((site) => (
          <li key={site.id}>
            <Link className="font-semibold" to={home(site)}>
              {site.name}
            </Link>
          </li>
        ))}
        {mayCreate && (
          <li>
            <Link to="/new-site">Make a new site</Link>
          </li>
        )}
        <li className="text-sm">
          <SignOut />
        </li>
      </ul>
    </main>
  );
}
