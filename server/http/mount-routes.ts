import { Router, type Request, type RequestHandler, type Response } from 'express';
import multer from 'multer';
import { isAllowed } from '#shared/permissions.ts';
import { Problem } from '#shared/problems.ts';
import { rememberReads } from '../db/remembered-reads.ts';
import { withOrganisation, type Transaction } from '../db/transaction.ts';
import { findContext } from '../features/access/access-service.ts';
import { claimKey, keepAnswer, payloadHash } from './idempotency.ts';
import { FileAnswer, type Context, type Dependencies, type Route, type UploadedFile } from './route.ts';
import { readSessionCookie } from './session-cookie.ts';
import { validate } from './validate.ts';

const fileBytesMax = 10 * 1024 * 1024;

const takeFile = multer({
  storage: multer.memoryStorage(),
  limits: { fileSize: fileBytesMax, files: 1, fields: 20, parts: 25 },
  defParamCharset: 'utf8',
}).single('file');

/** The context of the caller, checked against the route's permission. */
async function admit(
  tx: Transaction,
  route: Route,
  request: Request,
  deps: Dependencies,
  claims: NonNullable<Awaited<ReturnType<typeof readSessionCookie>>>,
): Promise<Context> {
  const siteId = typeof request.params['siteId'] === 'string' ? request.params['siteId'] : null;
  const context = await findContext(tx, claims, siteId, deps.now(), String(request.id ?? ''));
  if (route.permission !== 'signed-in' && !isAllowed(context.roles, route.permission)) {
    throw new Problem(
      'not-allowed',
      'Your role cannot do this here. Ask the administrator of the site if it should.',
    );
  }
  return context;
}

interface Answer {
  status: number;
  response: unknown;
}

/** Runs one call in one transaction: session, permission, validation, key, work. */
async function answer(route: Route, request: Request, deps: Dependencies): Promise<Answer> {
  const claims = await readSessionCookie(request, deps.sessionSecret);
  if (!claims) throw new Problem('not-signed-in', 'Sign in to go on.');
  const file: UploadedFile | undefined = request.file && {
    name: request.file.originalname,
    bytes: request.file.buffer,
  };
  return withOrganisation(deps.database, claims, async (tx) => {
    if (route.method === 'get') rememberReads(tx);
    const context = await admit(tx, route, request, deps, claims);
    const parts = validate(route, { params: request.params, query: request.query, body: request.body });
    const run = () => route.handle({ tx, context, ...parts, file, deps, request });
    if (route.method === 'get') return { status: 200, response: await run() };
    const key = request.get('idempotency-key');
    if (!key) throw new Problem('key-missing', 'Send a unique Idempotency-Key header with every write.');
    const name = `${route.method} ${request.path}`;
    const hash = payloadHash(name, request.body, file);
    const first = await claimKey(tx, context, key, hash);
    if (first) return first;
    const made = { status: route.method === 'post' ? 201 : 200, response: await run() };
    await keepAnswer(tx, context, key, name, hash, made);
    return made;
  });
}

function send(response: Response, { status, response: value }: Answer): void {
  if (value instanceof FileAnswer) {
    response.status(200).attachment(value.fileName).type(value.contentType).send(value.bytes);
    return;
  }
  response.status(status).json(value ?? null);
}

/** Puts every declared route on a router. */
export function mountRoutes(routes: readonly Route[], deps: Dependencies): Router {
  const router = Router();
  for (const route of routes) {
    const handler: RequestHandler = async (request, response) =>
      send(response, await answer(route, request, deps));
    router[route.method](route.path, ...(route.takesFile ? [takeFile] : []), handler);
  }
  return router;
}
