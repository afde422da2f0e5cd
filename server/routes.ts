import { balanceRoutes } from './features/balance/balance-routes.ts';
import { forecastRoutes } from './features/forecast/forecast-routes.ts';
import { labRoutes } from './features/lab/lab-routes.ts';
import { readingRoutes } from './features/readings/reading-routes.ts';
import { reportRoutes } from './features/reports/report-routes.ts';
import { siteRoutes } from './features/sites/site-routes.ts';
import type { Route } from './http/route.ts';

/** Every route that works with the record; the permission test walks this list. */
export const allRoutes: Route[] = [
  ...siteRoutes,
  ...readingRoutes,
  ...balanceRoutes,
  ...forecastRoutes,
  ...labRoutes,
  ...reportRoutes,
];
