import { siteParams, siteRecordParams } from '#shared/schemas/params.ts';
import {
  cellInput,
  cellNameInput,
  coverChangeInput,
  coverCorrectionInput,
  coverTypeInput,
  meterInput,
  placeInput,
  siteInput,
  siteSettingsInput,
  storeInput,
  sumpInput,
  wasteInput,
} from '#shared/schemas/sites.ts';
import { meterEventInput } from '#shared/schemas/readings.ts';
import { route, type Route } from '../../http/route.ts';
import { readMe } from '../access/access-service.ts';
import { addWaste, createCell, renameCell } from './cell-service.ts';
import { changeCover, confirmCoverType, correctCover, createCoverType } from './cover-service.ts';
import { addMeterEvent, createMeter, createPlace, createStore, createSump } from './metering-service.ts';
import { createSite, readSiteStructure, updateSettings } from './site-service.ts';

export const siteRoutes: Route[] = [
  route({
    method: 'get',
    path: '/me',
    permission: 'signed-in',
    handle: ({ tx, context, deps }) => readMe(tx, context, deps),
  }),
  route({
    method: 'post',
    path: '/sites',
    permission: 'create:site',
    body: siteInput,
    handle: ({ tx, context, deps, body }) => createSite(tx, context, deps, body),
  }),
  route({
    method: 'get',
    path: '/sites/:siteId',
    permission: 'read:site',
    params: siteParams,
    handle: ({ tx, context }) => readSiteStructure(tx, context),
  }),
  route({
    method: 'put',
    path: '/sites/:siteId',
    permission: 'change:site',
    params: siteParams,
    body: siteSettingsInput,
    handle: ({ tx, context, body, request }) => updateSettings(tx, context, body, request.get('if-match')),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/cells',
    permission: 'change:site',
    params: siteParams,
    body: cellInput,
    handle: ({ tx, context, deps, body }) => createCell(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/cover-periods',
    permission: 'change:site',
    params: siteParams,
    body: coverChangeInput,
    handle: ({ tx, context, deps, body }) => changeCover(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/cell-names',
    permission: 'change:site',
    params: siteParams,
    body: cellNameInput,
    handle: ({ tx, context, body }) => renameCell(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/cover-corrections',
    permission: 'change:site',
    params: siteParams,
    body: coverCorrectionInput,
    handle: ({ tx, context, deps, body }) => correctCover(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/cover-types',
    permission: 'change:site',
    params: siteParams,
    body: coverTypeInput,
    handle: ({ tx, context, body }) => createCoverType(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/cover-types/:id/confirmation',
    permission: 'change:parameters',
    params: siteRecordParams,
    handle: ({ tx, context, deps, params }) => confirmCoverType(tx, context, deps, params.id),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/waste-placed',
    permission: 'change:site',
    params: siteParams,
    body: wasteInput,
    handle: ({ tx, context, deps, body }) => addWaste(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/places',
    permission: 'change:site',
    params: siteParams,
    body: placeInput,
    handle: ({ tx, context, body }) => createPlace(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/sumps',
    permission: 'change:site',
    params: siteParams,
    body: sumpInput,
    handle: ({ tx, context, body }) => createSump(tx, context, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/meters',
    permission: 'change:site',
    params: siteParams,
    body: meterInput,
    handle: ({ tx, context, deps, body }) => createMeter(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/stores',
    permission: 'change:site',
    params: siteParams,
    body: storeInput,
    handle: ({ tx, context, deps, body }) => createStore(tx, context, deps, body),
  }),
  route({
    method: 'post',
    path: '/sites/:siteId/meter-events',
    permission: 'settle:reading',
    params: siteParams,
    body: meterEventInput,
    handle: ({ tx, context, deps, body }) => addMeterEvent(tx, context, deps, body),
  }),
];
