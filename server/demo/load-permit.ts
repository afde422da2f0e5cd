import { addDays } from '#shared/calendar/day.ts';
import type { Transaction } from '../db/transaction.ts';
import { insertPlanItems, insertSamplePoint, listAnalytes } from '../features/lab/lab-repository.ts';
import { insertLimits, insertPermit } from '../features/limits/limit-repository.ts';
import type { DemoPlan } from './demo-plan.ts';
import type { DemoIds } from './demo-site.ts';
import type { DemoActors } from './demo-actors.ts';
import type { Random } from './random.ts';

/** Limits after the pattern of 40 CFR 445.21, and a load limit invented for the demo. */
const limitRows = [
  ['bod5', 'daily-maximum', '140', 0],
  ['bod5', 'monthly-average', '37', 0],
  ['tss', 'daily-maximum', '88', 0],
  ['tss', 'monthly-average', '27', 0],
  ['ammonia', 'daily-maximum', '10', 1],
  ['ammonia', 'monthly-average', '4.9', 1],
  ['zinc', 'daily-maximum', '0.20', 2],
  ['zinc', 'monthly-average', '0.11', 2],
  ['phenol', 'daily-maximum', '0.026', 3],
  ['terpineol', 'daily-maximum', '0.033', 3],
] as const;

/** Sample points, the sampling plan and the invented permit; two limits wait for confirmation. */
export async function makePermit(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
  random: Random,
): Promise<void> {
  const engineer = actors.as('engineer', ids.site);
  const manager = actors.as('manager', ids.site);
  const { organisationId } = engineer;
  const analytes = await listAnalytes(tx);
  const id = (code: string) => analytes.find((one) => one.code === code)!.id;
  const fraction = (code: string) => analytes.find((one) => one.code === code)!.defaultFraction ?? '';
  const points = { eff: random.id(), c2: random.id(), c3: random.id() };
  await insertSamplePoint(tx, {
    organisationId,
    id: points.eff,
    siteId: ids.site,
    placeId: ids.places.outfall,
    code: 'EFF-1',
    name: 'Outfall 1',
    kind: 'effluent',
    aliases: ['EFF', 'EFF 1', 'Effluent', 'OF-1'],
  });
  await insertSamplePoint(tx, {
    organisationId,
    id: points.c2,
    siteId: ids.site,
    placeId: ids.sumps.S2.place,
    code: 'RAW-C2',
    name: 'Raw leachate, Middle',
    kind: 'raw-leachate',
    aliases: ['LCH-C2'],
  });
  await insertSamplePoint(tx, {
    organisationId,
    id: points.c3,
    siteId: ids.site,
    placeId: ids.sumps.S3.place,
    code: 'RAW-C3',
    name: 'Raw leachate, East',
    kind: 'raw-leachate',
    aliases: ['LCH-C3'],
  });
  const weekly = ['ph', 'bod5', 'tss', 'ammonia', 'zinc'];
  await insertPlanItems(
    tx,
    [
      ...weekly.map((code) => ({ code, samplesPerMonth: 4 })),
      { code: 'phenol', samplesPerMonth: 1 },
      { code: 'terpineol', samplesPerMonth: 1 },
    ].map(({ code, samplesPerMonth }) => ({
      organisationId,
      id: random.id(),
      samplePointId: points.eff,
      analyteId: id(code),
      fraction: fraction(code),
      samplesPerMonth,
      fromOn: plan.start,
    })),
  );
  const permitId = random.id();
  await insertPermit(tx, {
    organisationId,
    id: permitId,
    siteId: ids.site,
    number: 'VH-207',
    authority: 'Regional water authority (invented)',
    regime: 'direct',
    fromOn: plan.start,
  });
  const confirmed = { confirmedById: manager.personId, confirmedAt: `${addDays(plan.start, 9)}T10:00:00Z` };
  const common = {
    organisationId,
    permitId,
    samplePointId: points.eff,
    fromOn: plan.start,
    samplesMin: 4,
    belowDetectionRule: 'half' as const,
  };
  await insertLimits(tx, [
    ...limitRows.map(([code, statistic, valueText, decimals], index) => ({
      ...common,
      ...(index < 8 ? confirmed : {}),
      id: random.id(),
      analyteId: id(code),
      fraction: fraction(code),
      statistic,
      quantity: 'concentration' as const,
      valueText,
      unit: 'mg/L',
      decimals,
      citation: `part 3.1, line ${index + 1}`,
      samplesMin: ['phenol', 'terpineol'].includes(code) ? 1 : 4,
      ...(code === 'ammonia' ? { noticeHours: 24, writtenNoticeDays: 5, resampleDays: 30 } : {}),
    })),
    {
      ...common,
      ...confirmed,
      id: random.id(),
      analyteId: id('ph'),
      statistic: 'range',
      quantity: 'concentration',
      lowText: '6.0',
      highText: '9.0',
      unit: 'pH',
      decimals: 1,
      citation: 'part 3.1, line 11',
    },
    {
      ...common,
      ...confirmed,
      id: random.id(),
      analyteId: id('ammonia'),
      statistic: 'monthly-average',
      quantity: 'load',
      valueText: '0.90',
      unit: 'kg/d',
      decimals: 2,
      citation: 'part 3.2',
      flowPlaceId: ids.places.outfall,
    },
  ]);
}
