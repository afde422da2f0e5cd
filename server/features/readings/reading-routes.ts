import { siteDayParams, siteParams, siteRecordParams } from '#shared/schemas/params.ts';
import {
  estimateInput,
  levelInput,
  loadOutInput,
  notReadInput,
  rainInput,
  readingInput,
  roundNoteInput,
  settleInput,
  voidInput,
} from '#shared/schemas/readings.ts';
import { route, type Route } from '../../http/route.ts';
import { createLoadOut, voidLoadOut } from '../loads-out/load-out-service.ts';
import { createLevel, createNotRead, createRainDay, createRoundNote } from './point-service.ts';
import { createEstimate, createReading, settleDispute, voidReading } from './reading-service.ts';
import { readRound } from './round-view.ts';

export const readingRoutes: Route[] = [
  route({
    method: 'get',
    path: '/sites/:siteId/round/:day',
    permission: 'read:record',
    params: siteDayParams,
    handle: ({ tx, context, deps, params }) => readRound(tx, context, deps, params.day),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/readings',
    permission: 'create:reading',
    params: siteParams,
    body: readingInput,
    handle: ({ tx, context, deps, body }) => createReading(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/readings/:id/void',
    permission: 'settle:reading',
    params: siteRecordParams,
    body: voidInput,
    handle: ({ tx, context, deps, params, body }) => voidReading(tx, context, deps, params.id, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/levels',
    permission: 'create:reading',
    params: siteParams,
    body: levelInput,
    handle: ({ tx, context, deps, body }) => createLevel(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/rain-days',
    permission: 'create:reading',
    params: siteParams,
    body: rainInput,
    handle: ({ tx, context, deps, body }) => createRainDay(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/not-read',
    permission: 'create:reading',
    params: siteParams,
    body: notReadInput,
    handle: ({ tx, context, deps, body }) => createNotRead(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/round-notes',
    permission: 'create:reading',
    params: siteParams,
    body: roundNoteInput,
    handle: ({ tx, context, deps, body }) => createRoundNote(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/adjustments',
    permission: 'settle:reading',
    params: siteParams,
    body: estimateInput,
    handle: ({ tx, context, deps, body }) => createEstimate(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/disputes',
    permission: 'settle:reading',
    params: siteParams,
    body: settleInput,
    handle: ({ tx, context, deps, body }) => settleDispute(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/loads-out',
    permission: 'create:reading',
    params: siteParams,
    body: loadOutInput,
    handle: ({ tx, context, deps, body }) => createLoadOut(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/loads-out/:id/void',
    permission: 'settle:reading',
    params: siteRecordParams,
    body: voidInput,
    handle: ({ tx, context, deps, params, body }) => voidLoadOut(tx, context, deps, params.id, body),
  }),
];
