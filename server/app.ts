import { existsSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import compression from 'compression';
import express, { type Express } from 'express';
import helmet from 'helmet';
import { pinoHttp } from 'pino-http';
import { Problem } from '#shared/problems.ts';
import { accessRoutes } from './features/access/access-routes.ts';
import { mountRoutes } from './http/mount-routes.ts';
import { problemHandler } from './http/problem-handler.ts';
import type { Dependencies } from './http/route.ts';
import { sameOriginWrites } from './http/same-origin.ts';
import { allRoutes } from './routes.ts';

const clientFolder = fileURLToPath(new URL('../dist/client', import.meta.url));

/** The whole application, without listening. */
export function createApp(deps: Dependencies): Express {
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', 'loopback');
  app.use(
    helmet({
      contentSecurityPolicy: {
        directives: { 'upgrade-insecure-requests': null, 'style-src': ["'self'", "'unsafe-inline'"] },
      },
      strictTransportSecurity: false,
    }),
  );
  app.use(compression());
  app.use(
    pinoHttp({
      logger: deps.log,
      genReqId: () => deps.newId(),
      quietReqLogger: true,
      autoLogging: { ignore: (r) => !r.url?.startsWith('/api') },
    }),
  );
  app.get('/api/v1/health', (_request, response) => {
    response.json({ state: 'up' });
  });
  app.use('/api', sameOriginWrites, express.json({ limit: '1mb' }), (_request, response, next) => {
    response.set('Cache-Control', 'no-store');
    next();
  });
  app.use('/api/v1', accessRoutes(deps), mountRoutes(allRoutes, deps));
  app.use('/api', () => {
    throw new Problem('not-found', 'There is no such address in this API.');
  });
  if (existsSync(clientFolder)) {
    app.use(express.static(clientFolder, { index: false, maxAge: '1y', immutable: true, redirect: false }));
    app.get('/{*rest}', (_request, response) => {
      response.set('Cache-Control', 'no-cache').sendFile('index.html', { root: clientFolder });
    });
  }
  app.use(problemHandler(deps.log));
  return app;
}
