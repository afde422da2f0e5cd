import { Router, type Request, type Response } from 'express';
import { rateLimit } from 'express-rate-limit';
import type * as z from 'zod';
import { Problem } from '#shared/problems.ts';
import {
  accessLinkInput,
  demoSignInInput,
  firstRunInput,
  passwordResetInput,
  signInInput,
} from '#shared/schemas/access.ts';
import type { Dependencies } from '../../http/route.ts';
import {
  clearSessionCookie,
  readSessionCookie,
  setSessionCookie,
  type SessionClaims,
} from '../../http/session-cookie.ts';
import { validate } from '../../http/validate.ts';
import * as access from './access-service.ts';

const throttle = (perQuarterHour: number) =>
  rateLimit({
    windowMs: 15 * 60_000,
    limit: perQuarterHour,
    standardHeaders: 'draft-8',
    legacyHeaders: false,
    keyGenerator: (request) =>
      `${request.ip ?? ''} ${String((request.body as { email?: unknown } | undefined)?.email ?? '')}`,
    validate: { keyGeneratorIpFallback: false },
    handler: () => {
      throw new Problem(
        'too-many-tries',
        'Too many tries for this address. Wait a quarter of an hour, or ask for a new password.',
      );
    },
  });

/** The routes that work before anyone is signed in. They write no record, so they carry no Idempotency-Key. */
export function accessRoutes(deps: Dependencies): Router {
  const router = Router();
  const bodyOf = <T extends z.ZodType>(request: Request, schema: T): z.infer<T> =>
    validate({ body: schema }, { params: {}, query: {}, body: request.body }).body;
  const enter = async (request: Request, response: Response, claims: SessionClaims) => {
    await setSessionCookie(response, claims, deps.sessionSecret, request.secure);
    response.status(201).json({ personId: claims.personId });
  };
  const device = (request: Request) => request.get('user-agent');

  router.get('/entrance', async (_request, response) => {
    const state = await access.installationState(deps);
    const people = state.hasDemo ? await access.listDemoPeople(deps) : [];
    response.json({
      isEmpty: state.organisationCount === 0,
      demoPeople: people,
      hasMailCatcher: Boolean(deps.caughtMail),
    });
  });
  router.post('/sign-in', throttle(20), async (request, response) => {
    await enter(request, response, await access.signIn(deps, bodyOf(request, signInInput), device(request)));
  });
  router.post('/demo-sign-in', async (request, response) => {
    await enter(
      request,
      response,
      await access.signInToDemo(deps, bodyOf(request, demoSignInInput).email, device(request)),
    );
  });
  router.post('/sign-out', async (request, response) => {
    const claims = await readSessionCookie(request, deps.sessionSecret);
    if (claims) await access.signOut(deps, claims);
    clearSessionCookie(response);
    response.status(204).end();
  });
  router.post('/password-resets', throttle(5), async (request, response) => {
    await access.askForPasswordReset(deps, bodyOf(request, passwordResetInput).email);
    response.status(202).json({ sentence: 'If this address is known here, a link is on its way.' });
  });
  router.post('/passwords', throttle(20), async (request, response) => {
    await enter(
      request,
      response,
      await access.setPasswordByLink(deps, bodyOf(request, accessLinkInput), device(request)),
    );
  });
  router.post('/first-run', throttle(10), async (request, response) => {
    await enter(
      request,
      response,
      await access.startFirstRun(deps, bodyOf(request, firstRunInput), device(request)),
    );
  });
  router.get('/caught-mail', async (_request, response) => {
    if (!deps.caughtMail)
      throw new Problem('not-found', 'Mail is sent by a real server here, so nothing is caught.');
    response.json(await deps.caughtMail());
  });
  return router;
}
