import * as z from 'zod';
import {
  compareNoteInput,
  freezeInput,
  parameterSetInput,
  tryBalanceInput,
} from '#shared/schemas/balance.ts';
import { climateMappingInput, climateUploadInput, gapChoiceInput } from '#shared/schemas/climate.ts';
import { siteMonthParams, siteParams, siteRecordParams } from '#shared/schemas/params.ts';
import { recordId } from '#shared/schemas/text.ts';
import { tryBalance } from '#shared/water-balance/try-balance.ts';
import { route, type Route } from '../../http/route.ts';
import {
  confirmClimate,
  readClimateImport,
  remapClimate,
  undoClimate,
  uploadClimate,
} from '../climate/climate-import-service.ts';
import { chooseForGap, readClimate } from '../climate/climate-service.ts';
import { readCompare, writeNote } from '../compare/compare-service.ts';
import { readBalance, readWorking } from './balance-view.ts';
import { acceptRun, createParameterSet, freezeRun, readParameterSets, recheckRun } from './run-service.ts';

export const balanceRoutes: Route[] = [
  route({
    method: 'get',
    path: '/sites/:siteId/balance/:month',
    permission: 'read:record',
    params: siteMonthParams,
    query: z.object({ run: recordId.optional() }),
    handle: ({ tx, context, deps, params, query }) => readBalance(tx, context, deps, params.month, query.run),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/balance-steps/:id/:term',
    permission: 'read:record',
    params: z.object({ siteId: recordId, id: recordId, term: z.string() }),
    handle: ({ tx, context, deps, params }) => readWorking(tx, context, deps, params.id, params.term),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/parameter-sets',
    permission: 'read:record',
    params: siteParams,
    handle: ({ tx, context, deps }) => readParameterSets(tx, context, deps),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/parameter-sets',
    permission: 'change:parameters',
    params: siteParams,
    body: parameterSetInput,
    handle: ({ tx, context, deps, body }) => createParameterSet(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/balance-runs',
    permission: 'freeze:run',
    params: siteParams,
    body: freezeInput,
    handle: ({ tx, context, deps, body }) => freezeRun(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/balance-runs/:id/acceptance',
    permission: 'freeze:run',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => acceptRun(tx, context, deps, params.id),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/balance-runs/:id/recheck',
    permission: 'read:record',
    params: siteRecordParams,
    handle: ({ tx, context, params }) => recheckRun(tx, context, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/try-balance',
    permission: 'read:record',
    params: siteParams,
    body: tryBalanceInput,
    handle: ({ body }) => Promise.resolve(tryBalance(body)),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/compare/:month',
    permission: 'read:record',
    params: siteMonthParams,
    query: z.object({
      cell: z.string().max(40).optional(),
      months: z.coerce.number().int().min(3).max(120).default(12),
    }),
    handle: ({ tx, context, deps, params, query }) =>
      readCompare(tx, context, deps, query.cell ?? '', params.month, query.months),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/compare-notes',
    permission: 'note:comparison',
    params: siteParams,
    body: compareNoteInput,
    handle: ({ tx, context, deps, body }) => writeNote(tx, context, deps, body),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/climate',
    permission: 'read:record',
    params: siteParams,
    handle: ({ tx, context }) => readClimate(tx, context),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/climate-imports',
    permission: 'import:climate',
    params: siteParams,
    body: climateUploadInput,
    takesFile: true,
    handle: ({ tx, context, deps, body, file }) => uploadClimate(tx, context, deps, body, file),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/climate-imports/:id',
    permission: 'read:record',
    params: siteRecordParams,
    handle: ({ tx, context, params }) => readClimateImport(tx, context, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/climate-imports/:id/mapping',
    permission: 'import:climate',
    params: siteRecordParams,
    body: climateMappingInput,
    handle: ({ tx, context, deps, params, body }) => remapClimate(tx, context, deps, params.id, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/climate-imports/:id/confirmation',
    permission: 'import:climate',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => confirmClimate(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/climate-imports/:id/undo',
    permission: 'import:climate',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => undoClimate(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/climate-gap-choices',
    permission: 'change:parameters',
    params: siteParams,
    body: gapChoiceInput,
    handle: ({ tx, context, body }) => chooseForGap(tx, context, body),
  }),
];
