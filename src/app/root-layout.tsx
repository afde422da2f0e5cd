import { useQuery } from '@tanstack/react-query';
import { ChevronLeft, ChevronRight, Menu } from 'lucide-react';
import { useState, type ReactNode } from 'react';
import { Link, NavLink, Navigate, Outlet, useLocation, useParams } from 'react-router';
import { addMonths } from '#shared/calendar/month.ts';
import { isAllowed, roleNames } from '#shared/permissions.ts';
import type { MeView, SiteView } from '#shared/schemas/access.ts';
import type { StripView } from '#shared/views/month-view.ts';
import { Failed, Loading } from '../components/state.tsx';
import { OutboxLine } from '../features/round/outbox-line.tsx';
import { SignOut } from '../features/access/sign-out.tsx';
import { ApiProblem } from '../lib/api-client.ts';
import { meQuery, useRecord } from '../lib/record.ts';
import { MonthStrip } from './month-strip.tsx';
import { areaPath, areas, monthOfPeriod, type Area } from './paths.ts';
import type { Place } from './place.ts';

const monthKey = 'tallyweir-month';

function Frame({
  me,
  site,
  month,
  area,
  children,
}: {
  me: MeView;
  site: SiteView;
  month: string;
  area: Area;
  children: ReactNode;
}) {
  const strip = useRecord<StripView>(site.id, `/strip/${month}`);
  const { pathname } = useLocation();
  const [menuPath, setMenuPath] = useState<string | null>(null);
  const isMenuOpen = menuPath === pathname;
  const seen = areas.filter((one) => isAllowed(site.roles, one.permission));
  const yearPath = (count: number) =>
    areaPath(
      site.slug,
      area === 'site' || area === 'trail' || area === 'method' ? 'month' : area,
      addMonths(month, count),
      site.today,
    );
  return (
    <>
      <a
        href="#main"
        className="sr-only focus:not-sr-only focus:absolute focus:z-50 focus:bg-surface focus:p-3"
      >
        To the content
      </a>
      <header className="bg-surface border-b border-line no-print">
        <div className="max-w-[1280px] mx-auto px-2 md:px-8 flex items-center gap-4 min-h-[96px] min-w-0">
          <div className="hidden md:block w-[148px] shrink-0 leading-tight">
            <Link to="/" className="text-sm text-muted no-underline">
              Tallyweir
            </Link>
            <p className="font-semibold text-lg">{site.name}</p>
            <p className="text-sm flex items-center gap-2 mt-1">
              <Link
                to={yearPath(-12)}
                aria-label="A year earlier"
                className="border border-line rounded-sm size-6 inline-grid place-items-center"
              >
                <ChevronLeft aria-hidden size={16} />
              </Link>
              <span className="font-medium">{(strip.data?.yearStart ?? month).slice(0, 4)}</span>
              <Link
                to={yearPath(12)}
                aria-label="A year later"
                className="border border-line rounded-sm size-6 inline-grid place-items-center"
              >
                <ChevronRight aria-hidden size={16} />
              </Link>
            </p>
          </div>
          {strip.data ? (
            <MonthStrip strip={strip.data} month={month} slug={site.slug} area={area} />
          ) : (
            <div className="h-[76px]" />
          )}
        </div>
        <div className="border-t border-line">
          <div className="max-w-[1280px] mx-auto px-4 md:px-8 flex items-stretch flex-wrap gap-x-5 min-h-11">
            <p className="md:hidden font-semibold flex items-center">{site.name}</p>
            <button
              type="button"
              className="md:hidden ml-auto flex items-center gap-2 min-h-12 font-medium"
              aria-expanded={isMenuOpen}
              onClick={() => setMenuPath(isMenuOpen ? null : pathname)}
            >
              <Menu aria-hidden size={20} /> Pages
            </button>
            <nav
              aria-label="Pages"
              className={`${isMenuOpen ? 'grid grid-cols-2' : 'hidden'} md:flex flex-wrap gap-x-5 w-full md:w-auto`}
            >
              {seen.map((one) => (
                <NavLink
                  key={one.area}
                  to={areaPath(site.slug, one.area, month, site.today)}
                  className={({ isActive }) =>
                    `flex items-center min-h-12 md:min-h-11 no-underline text-ink border-b-[3px] ${isActive || area === one.area ? 'border-primary font-semibold' : 'border-transparent'}`
                  }
                >
                  {one.name}
                </NavLink>
              ))}
            </nav>
            <div className="hidden md:flex ml-auto items-center gap-4 text-sm text-muted">
              <span>
                {me.displayName}, {site.roles.map((role) => roleNames[role]).join(', ')}
              </span>
              <SignOut />
            </div>
          </div>
          <div
            className={`${isMenuOpen ? 'flex' : 'hidden'} md:hidden px-4 pb-3 items-center gap-4 text-sm text-muted`}
          >
            <span>
              {me.displayName}, {site.roles.map((role) => roleNames[role]).join(', ')}
            </span>
            <SignOut />
          </div>
        </div>
      </header>
      <main id="main" className="max-w-[1280px] mx-auto px-4 md:px-8 pt-5 md:pt-7 pb-12">
        <OutboxLine siteId={site.id} />
        {children}
      </main>
    </>
  );
}

/** Frame of every page of a site: who, where, which month. */
export function RootLayout() {
  const me = useQuery(meQuery);
  const { slug } = useParams();
  const { pathname } = useLocation();
  const [, , , areaText, period] = pathname.split('/');
  if (me.isPending)
    return (
      <main className="p-8">
        <Loading />
      </main>
    );
  if (me.isError) {
    const isSignedOut = me.error instanceof ApiProblem && me.error.kind === 'not-signed-in';
    return isSignedOut ? (
      <Navigate to={`/sign-in?next=${encodeURIComponent(pathname)}`} replace />
    ) : (
      <main className="p-8">
        <Failed error={me.error} onRetry={() => void me.refetch()} />
      </main>
    );
  }
  const site = me.data.sites.find((one) => one.slug === slug);
  if (!site) return <Navigate to="/" replace />;
  const month = monthOfPeriod(period) ?? sessionStorage.getItem(monthKey) ?? site.today.slice(0, 7);
  if (monthOfPeriod(period)) sessionStorage.setItem(monthKey, month);
  const area = (areas.find((one) => one.area === areaText)?.area ?? 'month') as Area;
  const place: Place = { me: me.data, site, month };
  return (
    <Frame me={me.data} site={site} month={month} area={area}>
      <Outlet context={place} />
    </Frame>
  );
}
