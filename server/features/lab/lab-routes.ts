import {
  clockDoneInput,
  exceedanceCloseInput,
  exceedanceNoteInput,
  labAnswerInput,
  labUploadInput,
  laboratoryInput,
  limitInput,
  permitInput,
  samplePointInput,
} from '#shared/schemas/lab.ts';
import { siteMonthParams, siteParams, siteRecordParams } from '#shared/schemas/params.ts';
import { recordId } from '#shared/schemas/text.ts';
import { route, type Route } from '../../http/route.ts';
import { addNote, closeExceedance, finishClock } from '../limits/exceedance-service.ts';
import {
  confirmLimit,
  createLimit,
  createPermit,
  readLimitChoices,
  readLimits,
} from '../limits/limit-service.ts';
import {
  answerQuestion,
  confirmResults,
  discardResults,
  restageResults,
  undoResults,
  uploadResults,
} from './lab-import-service.ts';
import { readLabImport } from './lab-import-view.ts';
import { createLaboratory, createSamplePoint, readLab } from './lab-view.ts';

const clockParams = siteRecordParams.extend({ clockId: recordId });

export const labRoutes: Route[] = [
  route({
    method: 'get',
    path: '/sites/:siteId/lab/:month',
    permission: 'read:lab',
    params: siteMonthParams,
    handle: ({ tx, context, params }) => readLab(tx, context, params.month),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/lab-imports',
    permission: 'upload:results',
    params: siteParams,
    body: labUploadInput,
    takesFile: true,
    handle: ({ tx, context, deps, body, file }) => uploadResults(tx, context, deps, body, file),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/lab-imports/:id',
    permission: 'read:lab',
    params: siteRecordParams,
    handle: ({ tx, context, params }) => readLabImport(tx, context, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/lab-imports/:id/answers',
    permission: 'upload:results',
    params: siteRecordParams,
    body: labAnswerInput,
    handle: ({ tx, context, deps, params, body }) => answerQuestion(tx, context, deps, params.id, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/lab-imports/:id/confirmation',
    permission: 'upload:results',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => confirmResults(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/lab-imports/:id/reading',
    permission: 'upload:results',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => restageResults(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/lab-imports/:id/discard',
    permission: 'upload:results',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => discardResults(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/lab-imports/:id/undo',
    permission: 'upload:results',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => undoResults(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/laboratories',
    permission: 'change:site',
    params: siteParams,
    body: laboratoryInput,
    handle: ({ tx, context, body }) => createLaboratory(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/sample-points',
    permission: 'change:site',
    params: siteParams,
    body: samplePointInput,
    handle: ({ tx, context, body }) => createSamplePoint(tx, context, body),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/limits/:month',
    permission: 'read:record',
    params: siteMonthParams,
    handle: ({ tx, context, deps, params }) => readLimits(tx, context, deps, params.month),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId/limit-choices',
    permission: 'read:record',
    params: siteParams,
    handle: ({ tx, context }) => readLimitChoices(tx, context),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/permits',
    permission: 'change:permit',
    params: siteParams,
    body: permitInput,
    handle: ({ tx, context, body }) => createPermit(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/limits',
    permission: 'change:permit',
    params: siteParams,
    body: limitInput,
    handle: ({ tx, context, body }) => createLimit(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/limits/:id/confirmation',
    permission: 'confirm:limit',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => confirmLimit(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/exceedances/:id/clocks/:clockId',
    permission: 'follow:exceedance',
    params: clockParams,
    body: clockDoneInput,
    handle: ({ tx, context, deps, params, body }) =>
      finishClock(tx, context, deps, params.id, params.clockId, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/exceedances/:id/notes',
    permission: 'follow:exceedance',
    params: siteRecordParams,
    body: exceedanceNoteInput,
    handle: ({ tx, context, deps, params, body }) => addNote(tx, context, deps, params.id, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/exceedances/:id/closing',
    permission: 'follow:exceedance',
    params: siteRecordParams,
    body: exceedanceCloseInput,
    handle: ({ tx, context, deps, params, body }) => closeExceedance(tx, context, deps, params.id, body),
  }),
];
