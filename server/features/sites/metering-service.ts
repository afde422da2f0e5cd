import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { Problem, fieldProblem, type FieldProblem } from '#shared/problems.ts';
import type { meterInput, placeInput, storeInput, sumpInput } from '#shared/schemas/sites.ts';
import type { meterEventInput } from '#shared/schemas/readings.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { repostMeter } from '../ledger/posting-service.ts';
import { resolveObservedAt } from '../readings/observed-time.ts';
import { lastOnSameRegister } from '../readings/reading-service.ts';
import * as repository from './site-repository.ts';
import { readSite, siteOf, type SiteRecord } from './site-service.ts';

const refuse = (errors: FieldProblem[]) => {
  if (errors.length) throw new Problem('fields-need-another-look', errors[0]!.detail, errors);
};

const nextPosition = (record: SiteRecord) =>
  Math.max(0, ...record.roundPoints.map((point) => point.position)) + 1;

export async function createPlace(tx: Transaction, context: Context, input: z.output<typeof placeInput>) {
  await repository.insertPlaces(tx, [
    { organisationId: context.organisationId, siteId: siteOf(context), ...input },
  ]);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'places',
    subjectId: input.id,
    sentence: `Place ${input.name} was added.`,
    after: input,
  });
  return { id: input.id };
}

/** Makes a sump with the place that stands for it in the ledger. */
export async function createSump(tx: Transaction, context: Context, input: z.output<typeof sumpInput>) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const cell = record.cells.find((one) => one.id === input.cellId);
  if (!cell) throw fieldProblem('/cellId', 'Choose a cell of this site.');
  const errors: FieldProblem[] = [];
  if (record.sumps.some((sump) => sump.code === input.code))
    errors.push({ pointer: '/code', detail: `There is already a sump ${input.code}. Choose another code.` });
  const linedM2 = Math.max(
    0,
    ...record.cellAreas.filter((area) => area.cellId === cell.id).map((area) => Number(area.linedAreaM2)),
  );
  if (linedM2 > 0 && Number(input.areaServedM2) > linedM2)
    errors.push({
      pointer: '/areaServedM2',
      detail: `${cell.code} has ${linedM2} m² lined; a sump cannot drain more than that.`,
    });
  if (input.kind === 'leak-detection' && !input.actionRateLPerHaDay)
    errors.push({
      pointer: '/actionRateLPerHaDay',
      detail: 'Enter the action rate of the permit for a leak-detection sump, in L/ha·d.',
    });
  refuse(errors);
  await repository.insertPlaces(tx, [
    {
      organisationId: context.organisationId,
      id: input.placeId,
      siteId,
      kind: 'sump',
      name: `Sump ${input.code}`,
      cellId: cell.id,
    },
  ]);
  await repository.insertSump(tx, {
    organisationId: context.organisationId,
    siteId,
    ...input,
    headLimitM: input.headLimitM ?? null,
    actionRateLPerHaDay: input.actionRateLPerHaDay ?? null,
  });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'sumps',
    subjectId: input.id,
    sentence: `Sump ${input.code} of ${cell.code} was added.`,
    after: input,
  });
  return { id: input.id };
}

/** Makes a meter and puts it at the end of the walking order. */
export async function createMeter(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof meterInput>,
) {
  const siteId = siteOf(context);
  const { organisationId } = context;
  const record = await readSite(tx, siteId);
  const errors: FieldProblem[] = [];
  const isKnown = (id: string) => record.places.some((place) => place.id === id);
  if (!isKnown(input.fromPlaceId))
    errors.push({ pointer: '/fromPlaceId', detail: 'Choose where the water comes from.' });
  if (!isKnown(input.toPlaceId))
    errors.push({ pointer: '/toPlaceId', detail: 'Choose where the water goes.' });
  if (input.fromPlaceId === input.toPlaceId)
    errors.push({ pointer: '/toPlaceId', detail: 'The water must go somewhere else than it comes from.' });
  if (record.meters.some((meter) => meter.code === input.code))
    errors.push({ pointer: '/code', detail: `There is already a meter ${input.code}. Choose another code.` });
  if (input.decimals >= input.digits)
    errors.push({ pointer: '/decimals', detail: 'A register has fewer decimals than digits.' });
  refuse(errors);
  await repository.insertMeter(tx, { organisationId, siteId, ...input, sumpId: input.sumpId ?? null });
  await repository.insertRoundPoints(tx, [
    {
      organisationId,
      id: deps.newId(),
      siteId,
      position: nextPosition(record),
      kind: 'meter',
      subjectId: input.id,
    },
  ]);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'meters',
    subjectId: input.id,
    sentence: `Meter ${input.code} was added: ${input.digits} digits, ${input.unit} × ${input.multiplier}.`,
    after: input,
  });
  return { id: input.id };
}

/** Makes a store with its strapping table and puts its level at the end of the walking order. */
export async function createStore(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof storeInput>,
) {
  const siteId = siteOf(context);
  const { organisationId } = context;
  const record = await readSite(tx, siteId);
  const errors: FieldProblem[] = [];
  const rows = input.strapping.map((row) => ({ level: Number(row.levelM), volume: Number(row.volumeM3) }));
  rows.slice(1).forEach((row, index) => {
    if (row.level <= rows[index]!.level)
      errors.push({
        pointer: `/strapping/${index + 1}/levelM`,
        detail: `Levels must rise: ${row.level} m comes after ${rows[index]!.level} m.`,
      });
    if (row.volume < rows[index]!.volume)
      errors.push({
        pointer: `/strapping/${index + 1}/volumeM3`,
        detail: `Volumes must not fall as the level rises: ${row.volume} m³ comes after ${rows[index]!.volume} m³.`,
      });
  });
  if (Number(input.operatingLevelM) >= Number(input.crestLevelM))
    errors.push({
      pointer: '/operatingLevelM',
      detail: `The operating level must lie below the crest at ${input.crestLevelM} m.`,
    });
  if (rows.at(-1)!.level < Number(input.crestLevelM))
    errors.push({
      pointer: '/strapping',
      detail: `The table must reach the crest at ${input.crestLevelM} m.`,
    });
  if (record.stores.some((store) => store.code === input.code))
    errors.push({ pointer: '/code', detail: `There is already a store ${input.code}. Choose another code.` });
  refuse(errors);
  const { strapping, placeId, name, ...store } = input;
  await repository.insertPlaces(tx, [{ organisationId, id: placeId, siteId, kind: 'store', name }]);
  await repository.insertStore(tx, { organisationId, siteId, placeId, ...store });
  await repository.insertStoreLevels(
    tx,
    strapping.map((row) => ({ organisationId, id: deps.newId(), storeId: input.id, ...row })),
  );
  await repository.insertRoundPoints(tx, [
    {
      organisationId,
      id: deps.newId(),
      siteId,
      position: nextPosition(record),
      kind: 'level',
      subjectId: input.id,
    },
  ]);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'stores',
    subjectId: input.id,
    sentence: `Store ${input.code} ${name} was added.`,
    after: input,
  });
  return { id: input.id };
}

/** Records what happened to a meter and computes its days again. */
export async function addMeterEvent(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof meterEventInput>,
) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const meter = record.meters.find((one) => one.id === input.meterId);
  if (!meter) throw fieldProblem('/meterId', 'Choose a meter of this site.');
  const observed = await resolveObservedAt(tx, siteId, deps.now(), input);
  const last = await lastOnSameRegister(tx, record, meter.id, observed.observedAt);
  if (last && input.registerBefore && Number(input.registerBefore) < Number(last.registerValue))
    throw fieldProblem(
      '/registerBefore',
      `Meter ${meter.code} showed ${Number(last.registerValue)} before. Enter what the old register showed last, or correct that reading first.`,
    );
  await repository.insertMeterEvent(tx, {
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    meterId: meter.id,
    kind: input.kind,
    observedAt: observed.observedAt,
    siteDay: observed.siteDay,
    registerBefore: input.registerBefore ?? null,
    registerAfter: input.registerAfter ?? null,
    digitsAfter: input.digitsAfter ?? null,
    unitAfter: input.unitAfter ?? null,
    multiplierAfter: input.multiplierAfter ?? null,
    note: input.note ?? null,
  });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'meter-events',
    subjectId: input.id,
    sentence: `Meter ${meter.code}: ${input.kind.replace('-', ' ')} on ${dayName(observed.siteDay)}.`,
    reason: input.note,
    after: input,
  });
  // A register keeps its new unit and multiplier, so every later day is computed again.
  await repostMeter(tx, context, deps, await readSite(tx, siteId), meter.id, {
    atMs: Date.parse(observed.observedAt),
    toMs: deps.now().getTime(),
    factId: input.id,
    why: `Meter event: ${input.kind.replace('-', ' ')}`,
  });
  return { id: input.id };
}
