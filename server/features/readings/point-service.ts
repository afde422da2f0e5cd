import { Decimal } from 'decimal.js';
import type * as z from 'zod';
import { addDays, dayName } from '#shared/calendar/day.ts';
import { parseNumber } from '#shared/ledger/parse-number.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import {
  notReadReasonNames,
  type levelInput,
  type notReadInput,
  type rainInput,
  type roundNoteInput,
} from '#shared/schemas/readings.ts';
import { depthUnitsMm } from '#shared/units/unit-factors.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { readSite, siteDaysOf, siteOf } from '../sites/site-service.ts';
import { resolveObservedAt } from './observed-time.ts';
import * as repository from './reading-repository.ts';

const fact = (context: Context, deps: Dependencies, id: string) => ({
  organisationId: context.organisationId,
  id,
  recordedById: context.personId,
  recordedAt: deps.now().toISOString(),
});

/** A level typed with a decimal comma is shown back and takes one tap: never 210 for "2,10". */
function levelOf(input: z.output<typeof levelInput>): string {
  const parsed = parseNumber(input.levelText, { decimals: 3, unit: 'm' });
  if (parsed.kind === 'number') return parsed.value;
  if (parsed.kind === 'wrong') throw fieldProblem('/levelText', `Level: ${parsed.reason}`);
  if (parsed.readings.length === 1 && input.isConfirmed) return parsed.readings[0]!;
  throw fieldProblem(
    '/levelText',
    `Level: ${parsed.readings.map((value) => `${value} m`).join(' or ')}? ${parsed.readings.length === 1 ? 'Save once more if that is right.' : 'Enter it with a point.'}`,
  );
}

/** Stores the level of a store or sump as the gauge shows it. */
export async function createLevel(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof levelInput>,
) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const store = record.stores.find((one) => one.id === input.storeId);
  const sump = record.sumps.find((one) => one.id === input.sumpId);
  if (!store === !sump) throw fieldProblem('/storeId', 'Choose one store or one sump of this site.');
  const observed = await resolveObservedAt(tx, siteId, deps.now(), input);
  const levelM = levelOf(input);
  const level = Number(levelM);
  if (level < -0.1) throw fieldProblem('/levelText', 'Level must be −0.10 m or more.');
  if (store && level > Number(store.crestLevelM))
    throw fieldProblem(
      '/levelText',
      `Level must be ${Number(store.crestLevelM)} m or less: that is the crest of ${store.code}. Was the point left out?`,
    );
  if (sump && level > 5 && !input.isConfirmed)
    throw fieldProblem(
      '/levelText',
      `${level} m in a sump? If the gauge shows centimetres, that is ${level / 100} m. Enter metres, or save once more if it is right.`,
    );
  await repository.insertLevel(tx, {
    ...fact(context, deps, input.id),
    storeId: store?.id ?? null,
    sumpId: sump?.id ?? null,
    observedAt: observed.observedAt,
    observedOffsetMinutes: observed.observedOffsetMinutes,
    siteDay: observed.siteDay,
    typedText: input.levelText,
    levelM,
    note: input.note ?? null,
    supersedesId: input.supersedesId ?? null,
    reason: input.reason ?? null,
    deviceId: input.deviceId ?? null,
  });
  const name = store?.code ?? sump!.code;
  const isHigh = store !== undefined && level > Number(store.operatingLevelM);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'levels',
    subjectId: input.id,
    sentence: `Level of ${name} was read: ${levelM} m.`,
    after: input,
  });
  return {
    id: input.id,
    state: 'stored' as const,
    siteDay: observed.siteDay,
    observedAt: observed.observedAt,
    warning: isHigh
      ? `Above the highest operating level of ${Number(store.operatingLevelM)} m. Tell the supervisor.`
      : null,
  };
}

const rainAskedAboveMm = 200;

/** Stores rain: the depth belongs to the 24 hours before the reading. */
export async function createRainDay(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof rainInput>,
) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const station = record.stations.find((one) => one.id === input.stationId);
  if (!station) throw fieldProblem('/stationId', 'Choose a rain gauge of this site.');
  const observed = await resolveObservedAt(tx, siteId, deps.now(), input);
  let depthMm = '0';
  if (input.kind !== 'trace') {
    if (/cm|snow/i.test(input.depthText))
      throw fieldProblem(
        '/depthText',
        'Rain: a depth of snow is not rain. Melt what fell into the gauge, choose “snow, as water” and enter the millimetres of water.',
      );
    const parsed = parseNumber(input.depthText, { decimals: 1, unit: input.unit });
    if (parsed.kind !== 'number')
      throw fieldProblem('/depthText', `Rain: ${parsed.kind === 'wrong' ? parsed.reason : parsed.question}`);
    const depth = new Decimal(parsed.value);
    if (depth.lt(0)) throw fieldProblem('/depthText', 'Rain must be 0 or more.');
    if (input.unit === 'in' && depth.gt(40))
      throw fieldProblem(
        '/depthText',
        `Rain: ${parsed.value} in is not possible in a day. ${parsed.value} mm? Then choose mm.`,
      );
    depthMm = depth.times(depthUnitsMm[input.unit]).toDecimalPlaces(3).toFixed();
    if (Number(depthMm) > rainAskedAboveMm && !input.isConfirmed)
      throw fieldProblem(
        '/depthText',
        `${Number(depthMm)} mm in ${input.accumulatedDays ?? 1} day? Save once more if that is right.`,
      );
  }
  // The 24 hours before a morning reading lie on the site day before it.
  const siteDay = addDays(observed.siteDay, -1);
  const before = await repository.listRainDays(tx, [station.id], siteDay, siteDay);
  await repository.insertClimateDays(tx, [
    {
      ...fact(context, deps, input.id),
      stationId: station.id,
      siteDay,
      kind: input.kind,
      accumulatedDays: input.accumulatedDays ?? null,
      typedText: input.depthText,
      precipitationMm: depthMm,
      tMinC: before[0]?.tMinC ?? null,
      tMaxC: before[0]?.tMaxC ?? null,
      tMeanC: before[0]?.tMeanC ?? null,
      supersedesId: before[0]?.id ?? null,
      reason: before[0] ? 'Read again' : null,
    },
  ]);
  await recordChange(tx, context, {
    action: before[0] ? 'replace' : 'create',
    subjectType: 'climate-days',
    subjectId: input.id,
    sentence: `Rain of ${dayName(siteDay)}: ${input.kind === 'trace' ? 'trace' : `${depthMm} mm`}.`,
    before: before[0],
    after: input,
  });
  return { id: input.id, state: 'stored' as const, siteDay, observedAt: observed.observedAt };
}

/** Stores that a point was not read, and why: an answer, not a gap. */
export async function createNotRead(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof notReadInput>,
) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  if (!record.roundPoints.some((point) => point.id === input.roundPointId))
    throw fieldProblem('/roundPointId', 'Choose a point of this round.');
  const today = (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
  if (input.siteDay > today) throw fieldProblem('/siteDay', 'This day is still to come.');
  await repository.insertNotRead(tx, {
    ...fact(context, deps, input.id),
    siteId,
    roundPointId: input.roundPointId,
    siteDay: input.siteDay,
    reasonCode: input.reasonCode,
    note: input.note ?? null,
  });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'not-read',
    subjectId: input.id,
    sentence: `A point was not read on ${dayName(input.siteDay)}: ${notReadReasonNames[input.reasonCode].toLowerCase()}.`,
    reason: input.note,
    after: input,
  });
  return { id: input.id, state: 'stored' as const };
}

export async function createRoundNote(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof roundNoteInput>,
) {
  const siteId = siteOf(context);
  if (!(await readSite(tx, siteId)).site) throw new Problem('not-found', 'There is no such site.');
  await repository.insertRoundNote(tx, {
    ...fact(context, deps, input.id),
    siteId,
    siteDay: input.siteDay,
    note: input.note,
  });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'round-notes',
    subjectId: input.id,
    sentence: `The round of ${dayName(input.siteDay)} was handed over.`,
    after: input,
  });
  return { id: input.id, state: 'stored' as const };
}
