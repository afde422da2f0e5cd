import type { RequestHandler } from 'express';
import { Problem } from '#shared/problems.ts';

/** Refuses writes that another site's page makes a browser send. */
export const sameOriginWrites: RequestHandler = (request, _response, next) => {
  if (request.method === 'GET' || request.method === 'HEAD') return next();
  const fetchSite = request.get('sec-fetch-site');
  const origin = request.get('origin');
  const fromElsewhere =
    (fetchSite !== undefined && fetchSite !== 'same-origin' && fetchSite !== 'none') ||
    (origin !== undefined && new URL(origin).host !== request.get('host'));
  if (fromElsewhere)
    throw new Problem(
      'request-from-elsewhere',
      'This write was sent by a page of another site and was refused.',
    );
  next();
};
