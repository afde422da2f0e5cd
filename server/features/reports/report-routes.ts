import * as z from 'zod';
import { invitationInput } from '#shared/schemas/access.ts';
import { closeMonthInput, reopenMonthInput, signReportInput } from '#shared/schemas/lab.ts';
import { siteMonthParams, siteParams, siteQuarterParams, siteRecordParams } from '#shared/schemas/params.ts';
import { recordId } from '#shared/schemas/text.ts';
import { route, type Route } from '../../http/route.ts';
import { closeMonth, reopenMonth } from '../closings/closing-service.ts';
import { readEntrySource } from '../ledger/entry-source.ts';
import { readLedger } from '../ledger/ledger-view.ts';
import { readMonth } from '../month/month-view.ts';
import { readStrip } from '../month/strip-service.ts';
import { endRole, invite, readPeople } from '../people/people-service.ts';
import { readTrail, readTrailCheck } from '../trail/trail-view.ts';
import { downloadReport, previewReport, readReport, signReport } from './report-service.ts';

export const reportRoutes: Route[] = [
  route({
    method: 'get',
    path: '/sites/:siteId/strip/:month',
    permission: 'read:site',
    params: siteMonthParams,
    handle: ({ tx, context, deps, params }) => readStrip(tx, context, deps, params.month),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/months/:month',
    permission: 'read:record',
    params: siteMonthParams,
    handle: ({ tx, context, deps, params }) => readMonth(tx, context, deps, params.month),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/months/:month/closing',
    permission: 'close:month',
    params: siteMonthParams,
    body: closeMonthInput,
    handle: ({ tx, context, deps, params, body }) => closeMonth(tx, context, deps, params.month, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/months/:month/reopening',
    permission: 'reopen:month',
    params: siteMonthParams,
    body: reopenMonthInput,
    handle: ({ tx, context, deps, params, body }) => reopenMonth(tx, context, deps, params.month, body),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/ledger/:month',
    permission: 'read:record',
    params: siteMonthParams,
    handle: ({ tx, context, params }) => readLedger(tx, context, params.month),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/entries/:id',
    permission: 'read:record',
    params: siteRecordParams,
    handle: ({ tx, context, params }) => readEntrySource(tx, context, params.id),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/reports/:quarter',
    permission: 'read:record',
    params: siteQuarterParams,
    handle: ({ tx, context, deps, params }) => readReport(tx, context, deps, params.quarter),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/reports/:quarter/preview',
    permission: 'read:record',
    params: siteQuarterParams,
    handle: ({ tx, context, deps, params }) => previewReport(tx, context, deps, params.quarter),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/reports/:quarter',
    permission: 'sign:report',
    params: siteQuarterParams,
    body: signReportInput,
    handle: ({ tx, context, deps, params, body }) => signReport(tx, context, deps, params.quarter, body),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/report-files/:id',
    permission: 'read:record',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => downloadReport(tx, context, deps, params.id),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/trail',
    permission: 'read:trail',
    params: siteParams,
    query: z.object({ before: z.coerce.number().int().optional(), subject: recordId.optional() }),
    handle: ({ tx, context, query }) => readTrail(tx, context, query),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/trail-check',
    permission: 'read:trail',
    params: siteParams,
    handle: ({ tx, context }) => readTrailCheck(tx, context),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/people',
    permission: 'read:people',
    params: siteParams,
    handle: ({ tx, context }) => readPeople(tx, context),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/people',
    permission: 'manage:people',
    params: siteParams,
    body: invitationInput,
    handle: ({ tx, context, deps, body }) => invite(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/people/:id/end',
    permission: 'manage:people',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => endRole(tx, context, deps, params.id),
  }),
];
