import { siteParams, siteRecordParams } from '#shared/schemas/params.ts';
import { calibrationInput, forecastInput } from '#shared/schemas/forecast.ts';
import { route, type Route } from '../../http/route.ts';
import { calibrateToCell } from '../calibration/calibration-service.ts';
import { cancelForecast, readForecast, readForecastStart, startForecast } from './forecast-service.ts';

export const forecastRoutes: Route[] = [
  route({
    method: 'get',
    path: '/sites/:siteId/forecasts',
    permission: 'read:record',
    params: siteParams,
    handle: ({ tx, context, deps }) => readForecastStart(tx, context, deps),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/forecasts',
    permission: 'run:forecast',
    params: siteParams,
    body: forecastInput,
    handle: ({ tx, context, deps, body }) => startForecast(tx, context, deps, body),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/forecasts/:id',
    permission: 'read:record',
    params: siteRecordParams,
    handle: ({ context, deps, params }) => Promise.resolve(readForecast(context, deps, params.id)),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/forecasts/:id/cancellation',
    permission: 'run:forecast',
    params: siteRecordParams,
    handle: ({ context, deps, params }) => Promise.resolve(cancelForecast(context, deps, params.id)),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/calibrations',
    permission: 'change:parameters',
    params: siteParams,
    body: calibrationInput,
    handle: ({ tx, context, deps, body }) => calibrateToCell(tx, context, deps, body),
  }),
];
