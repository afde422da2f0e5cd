import { lazy, Suspense, type ComponentType } from 'react';
import { createBrowserRouter, isRouteErrorResponse, Link, useRouteError } from 'react-router';
import { Loading } from '../components/state.tsx';
import { RootLayout } from './root-layout.tsx';
import { StartPage } from './start-page.tsx';

const page = (load: () => Promise<Record<string, ComponentType>>, name: string) => {
  const Page = lazy(async () => ({ default: (await load())[name]! }));
  return (
    <Suspense fallback={<Loading />}>
      <Page />
    </Suspense>
  );
};

function ErrorPage() {
  const error = useRouteError();
  const isMissing = isRouteErrorResponse(error) && error.status === 404;
  return (
    <main className="max-w-[66ch] mx-auto px-4 py-12 grid gap-3">
      <h1>{isMissing ? 'There is no page at this address' : 'This page could not be shown'}</h1>
      <p>
        {isMissing
          ? 'It may have moved. Nothing of the record is lost.'
          : 'Nothing of the record is lost. Load the page again; if it happens twice, tell your administrator.'}
      </p>
      <p>
        <Link to="/">Go to your sites</Link>
      </p>
    </main>
  );
}

export const router = createBrowserRouter([
  {
    errorElement: <ErrorPage />,
    children: [
      { path: '/', element: <StartPage /> },
      { path: '/sign-in', element: page(() => import('../features/access/sign-in-page.tsx'), 'SignInPage') },
      {
        path: '/password',
        element: page(() => import('../features/access/password-page.tsx'), 'PasswordPage'),
      },
      {
        path: '/first-run',
        element: page(() => import('../features/access/first-run-page.tsx'), 'FirstRunPage'),
      },
      {
        path: '/caught-mail',
        element: page(() => import('../features/access/caught-mail-page.tsx'), 'CaughtMailPage'),
      },
      { path: '/new-site', element: page(() => import('../features/site/new-site-page.tsx'), 'NewSitePage') },
      {
        path: '/sites/:slug',
        element: <RootLayout />,
        children: [
          {
            path: 'month/:month',
            element: page(() => import('../features/month/month-page.tsx'), 'MonthPage'),
          },
          {
            path: 'round/:day',
            element: page(() => import('../features/round/round-page.tsx'), 'RoundPage'),
          },
          {
            path: 'balance/:month',
            element: page(() => import('../features/balance/balance-page.tsx'), 'BalancePage'),
          },
          {
            path: 'compare/:month',
            element: page(() => import('../features/compare/compare-page.tsx'), 'ComparePage'),
          },
          {
            path: 'ledger/:month',
            element: page(() => import('../features/ledger/ledger-page.tsx'), 'LedgerPage'),
          },
          { path: 'lab/:month', element: page(() => import('../features/lab/lab-page.tsx'), 'LabPage') },
          {
            path: 'lab/:month/check/:importId',
            element: page(() => import('../features/lab/lab-check-page.tsx'), 'LabCheckPage'),
          },
          {
            path: 'limits/:month',
            element: page(() => import('../features/limits/limits-page.tsx'), 'LimitsPage'),
          },
          {
            path: 'report/:quarter',
            element: page(() => import('../features/report/report-page.tsx'), 'ReportPage'),
          },
          { path: 'ahead', element: page(() => import('../features/ahead/ahead-page.tsx'), 'AheadPage') },
          { path: 'site', element: page(() => import('../features/site/site-page.tsx'), 'SitePage') },
          {
            path: 'site/climate/:importId',
            element: page(() => import('../features/site/climate-check-page.tsx'), 'ClimateCheckPage'),
          },
          { path: 'trail', element: page(() => import('../features/trail/trail-page.tsx'), 'TrailPage') },
          { path: 'method', element: page(() => import('../features/method/method-page.tsx'), 'MethodPage') },
        ],
      },
    ],
  },
]);
