import { addDays, type Day } from '#shared/calendar/day.ts';
import { monthName, type Month } from '#shared/calendar/month.ts';
import { createSiteDays, type SiteDays } from '#shared/calendar/site-days.ts';
import { computeDayVolumes, type DayVolume } from '#shared/ledger/day-volumes.ts';
import { computeIntervals, type Interval, type MeterFacts } from '#shared/ledger/intervals.ts';
import { planPosting } from '#shared/ledger/post-days.ts';
import type { VolumeUnit } from '#shared/units/unit-factors.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as readingRepository from '../readings/reading-repository.ts';
import { siteOf, type SiteRecord } from '../sites/site-service.ts';
import * as repository from './entry-repository.ts';

type Meter = SiteRecord['meters'][number];

/** Facts of a meter as the pure computation takes them. */
export async function readMeterFacts(
  tx: Transaction,
  record: SiteRecord,
  meter: Meter,
  from: string,
  to: string,
): Promise<MeterFacts> {
  const readings = await readingRepository.listReadings(tx, [meter.id], from, to);
  const adjustments = await readingRepository.listAdjustments(tx, [meter.id]);
  const disputes = await readingRepository.listDisputes(tx, [meter.id]);
  return {
    spec: {
      digits: meter.digits,
      decimals: meter.decimals,
      unit: meter.unit as VolumeUnit,
      multiplier: meter.multiplier,
    },
    readings: readings.map((row) => ({
      id: row.id,
      observedAtMs: Date.parse(row.observedAt),
      registerValue: row.registerValue,
      answer: row.answer,
    })),
    events: record.meterEvents
      .filter((event) => event.meterId === meter.id && event.isVoid === 'no')
      .map((event) => ({
        id: event.id,
        kind: event.kind,
        observedAtMs: Date.parse(event.observedAt),
        registerBefore: event.registerBefore,
        registerAfter: event.registerAfter,
        digitsAfter: event.digitsAfter,
        unitAfter: event.unitAfter as VolumeUnit | null,
        multiplierAfter: event.multiplierAfter,
      })),
    adjustments: adjustments.map((row) => ({
      id: row.id,
      kind: row.kind,
      fromMs: Date.parse(row.fromAt),
      toMs: Date.parse(row.toAt),
      volumeM3: row.volumeM3,
      divisor: row.divisor,
    })),
    chosenReadingIds: new Set(disputes.map((row) => row.chosenReadingId)),
  };
}

interface Span {
  firstDay: Day;
  lastDay: Day;
  from: string;
  to: string;
}

const iso = (ms: number) => new Date(ms).toISOString();

/**
 * The days that facts between two instants can change, and the readings needed to compute them whole:
 * from the reading before to the reading after, widened to the readings around those days.
 */
async function affectedSpan(
  tx: Transaction,
  meterId: string,
  days: SiteDays,
  fromMs: number,
  toMs: number,
): Promise<Span> {
  const before = (await readingRepository.readingAtOrBefore(tx, meterId, iso(fromMs - 1))) ?? iso(fromMs);
  const after = (await readingRepository.readingAtOrAfter(tx, meterId, iso(toMs), true)) ?? iso(toMs);
  const firstDay = days.dayOf(Date.parse(before));
  const lastDay = days.dayOf(Date.parse(after));
  const from =
    (await readingRepository.readingAtOrBefore(tx, meterId, iso(days.startMs(firstDay)))) ??
    iso(days.startMs(firstDay));
  const to =
    (await readingRepository.readingAtOrAfter(tx, meterId, iso(days.startMs(addDays(lastDay, 1))))) ??
    iso(days.startMs(addDays(lastDay, 1)));
  return { firstDay, lastDay, from, to };
}

export interface Cause {
  atMs: number;
  toMs?: number;
  factId: string;
  why: string;
}

/** Rows for the entries table: reversals of what changed and replacements with the facts behind them. */
function entryRows(
  context: Context,
  deps: Dependencies,
  siteId: string,
  meter: Meter,
  live: {
    id: string;
    siteDay: string;
    basis: string;
    volumeM3: string;
    fromPlaceId: string;
    toPlaceId: string;
    factIds: unknown;
  }[],
  plan: ReturnType<typeof planPosting>,
  why: string,
) {
  const common = {
    organisationId: context.organisationId,
    recordedById: context.personId,
    siteId,
    meterId: meter.id,
    reason: why,
  };
  const byId = new Map(live.map((entry) => [entry.id, entry]));
  return [
    ...plan.reversals.map((entry) => {
      const original = byId.get(entry.id)!;
      return {
        ...common,
        id: deps.newId(),
        siteDay: entry.siteDay,
        basis: entry.basis as 'measured',
        fromPlaceId: original.fromPlaceId,
        toPlaceId: original.toPlaceId,
        volumeM3: entry.volumeM3.startsWith('-') ? entry.volumeM3.slice(1) : `-${entry.volumeM3}`,
        factIds: original.factIds,
        reversesId: entry.id,
      };
    }),
    ...plan.postings.map((day) => ({
      ...common,
      id: deps.newId(),
      siteDay: day.siteDay,
      basis: day.basis,
      fromPlaceId: meter.fromPlaceId,
      toPlaceId: meter.toPlaceId,
      volumeM3: day.volumeM3.toFixed(6),
      factIds: day.factIds,
    })),
  ];
}

/**
 * Computes the days a new fact touches again, and posts reversals and replacements for those that differ.
 * Days in closed months are not touched: the change waits as pending.
 * @returns the closed months for which the change waits
 */
export async function repostMeter(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  record: SiteRecord,
  meterId: string,
  cause: Cause,
): Promise<Month[]> {
  const siteId = siteOf(context);
  await repository.lockSiteLedger(tx, siteId);
  const meter = record.meters.find((one) => one.id === meterId);
  if (!meter) return [];
  const days = createSiteDays(record.dayRules);
  const span = await affectedSpan(tx, meterId, days, cause.atMs, cause.toMs ?? cause.atMs);
  const facts = await readMeterFacts(tx, record, meter, span.from, span.to);
  const { intervals } = computeIntervals(facts);
  const volumes = computeDayVolumes(intervals, days, record.site.measuredIntervalHoursMax).filter(
    (row) => row.siteDay >= span.firstDay && row.siteDay <= span.lastDay,
  );
  const live = await repository.listLiveEntriesOfMeter(tx, meterId, span.firstDay, span.lastDay);
  const plan = planPosting(volumes, live, await repository.listClosedMonths(tx, siteId));
  await repository.insertEntries(tx, entryRows(context, deps, siteId, meter, live, plan, cause.why));
  for (const month of plan.pendingMonths) {
    await repository.insertPendingChange(tx, {
      organisationId: context.organisationId,
      id: deps.newId(),
      siteId,
      month,
      meterId,
      factId: cause.factId,
      sentence: `${cause.why}, meter ${meter.code}: waits for ${monthName(month)} to be reopened.`,
    });
  }
  return plan.pendingMonths;
}

/** What a person is told whose entry waits for a closed month; null when none does. */
export const waitsWarning = (months: Month[]): string | null =>
  months.length
    ? `${months.map(monthName).join(' and ')} ${months.length > 1 ? 'are' : 'is'} closed. The entry is kept and counts when the site manager reopens the month.`
    : null;

/** Posts every day of a meter again over a span: used when a month is reopened. */
export async function repostMonth(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  record: SiteRecord,
  meterId: string,
  days: SiteDays,
  firstDay: Day,
  lastDay: Day,
): Promise<void> {
  await repostMeter(tx, context, deps, record, meterId, {
    atMs: days.startMs(firstDay),
    toMs: days.startMs(addDays(lastDay, 1)),
    factId: meterId,
    why: 'Month reopened',
  });
}

/** Recomputes all day volumes of a meter over a span, for the check that entries equal recomputed days. */
export async function recomputeDays(
  tx: Transaction,
  record: SiteRecord,
  meter: Meter,
  days: SiteDays,
  from: string,
  to: string,
): Promise<{ volumes: DayVolume[]; intervals: Interval[] }> {
  const { intervals } = computeIntervals(await readMeterFacts(tx, record, meter, from, to));
  return { intervals, volumes: computeDayVolumes(intervals, days, record.site.measuredIntervalHoursMax) };
}
