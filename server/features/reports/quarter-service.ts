import { addDays, dayName, daysBetween, firstDay, lastDay } from '#shared/calendar/day.ts';
import {
  monthRange,
  addMonths,
  daysInMonth,
  monthName,
  quarterMonths,
  quarterName,
  type Month,
} from '#shared/calendar/month.ts';
import type { Interval } from '#shared/ledger/intervals.ts';
import { leakDetectionRate } from '#shared/ledger/leak-detection.ts';
import { Problem } from '#shared/problems.ts';
import { notReadReasonNames } from '#shared/schemas/readings.ts';
import type { BalanceParameters, EngineCover } from '#shared/water-balance/engine-input.ts';
import type { StepTerms } from '#shared/water-balance/terms.ts';
import { stepCover } from '#shared/water-balance/run-water-balance.ts';
import type { CoverKind } from '#shared/water-balance/cover-types.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as balanceRepository from '../balance/balance-repository.ts';
import { predictionRun } from '../balance/run-service.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { listNotes } from '../compare/compare-service.ts';
import { measuredByCell } from '../compare/measured-service.ts';
import { listAnalytes, listLaboratories, listLiveResults, listSamplePoints } from '../lab/lab-repository.ts';
import * as entryRepository from '../ledger/entry-repository.ts';
import { readLedger } from '../ledger/ledger-view.ts';
import { recomputeDays } from '../ledger/posting-service.ts';
import { judgeMonths, type JudgedLimit } from '../limits/verdict-service.ts';
import { listAdjustments, listNotRead } from '../readings/reading-repository.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';

/** One plot and step of the quarter with all that the workbook's formulas need. */
export interface QuarterStep {
  cellCode: string;
  plotName: string;
  plotId: string;
  coverName: string;
  cover: EngineCover;
  month: Month;
  fromOn: string;
  dayCount: number;
  areaM2: number;
  runoffCoefficient: number;
  terms: StepTerms;
}

export interface QuarterCellMonth {
  cellCode: string;
  month: Month;
  areaM2: number;
  predictedM3: number;
  measuredM3: number | null;
  estimatedM3: number;
  allocatedM3: number;
}

export interface QuarterDay {
  meterCode: string;
  siteDay: string;
  month: Month;
  basis: string;
  volumeM3: number;
  from: string;
  to: string;
  /** Cell the water is counted for, with the sign it counts; '' when it is not a cell's leachate. */
  cellCode: string;
  counts: number;
}

/** Everything the quarter's report is made of, from one transaction. */
export interface Quarter {
  site: SiteRecord['site'];
  quarter: string;
  months: Month[];
  dueOn: string;
  generatedAt: string;
  run: {
    kind: string;
    number: number | null;
    engineVersion: string;
    inputSha256: string;
    isAccepted: boolean;
  };
  parameters: BalanceParameters;
  parameterSet: string;
  cells: { code: string; name: string }[];
  steps: QuarterStep[];
  cellMonths: QuarterCellMonth[];
  /** The whole site over the twelve months to the end of the quarter; null where nothing was read. */
  history: { month: Month; predictedM3: number; measuredM3: number | null }[];
  intervals: (Interval & { meterCode: string; from: string; to: string; hours: number })[];
  days: QuarterDay[];
  stores: {
    month: Month;
    name: string;
    balance: Awaited<ReturnType<typeof readLedger>>['stores'][number]['balance'];
  }[];
  loads: { month: Month; count: number; nominalM3: number; receivedM3: number }[];
  leakDetection: {
    sumpCode: string;
    month: Month;
    volumeM3: number | null;
    dayCount: number;
    lPerHaDay: number | null;
    actionRateLPerHaDay: number | null;
  }[];
  verdicts: JudgedLimit[];
  results: {
    pointCode: string;
    siteDay: string;
    analyteName: string;
    fraction: string;
    comparator: string;
    value: number | null;
    unit: string;
    laboratory: string;
    file: string;
    rawText: string;
    missingReason: string | null;
    qualifier: string | null;
  }[];
  notes: { when: string; subject: string; sentence: string }[];
}

async function stepsOf(
  tx: Transaction,
  record: SiteRecord,
  runId: string,
  months: Month[],
  parameters: BalanceParameters,
): Promise<QuarterStep[]> {
  const rows = await balanceRepository.listSteps(tx, runId, months[0], months.at(-1));
  return rows
    .map((row) => {
      const type = record.coverTypes.find((one) => one.id === row.coverTypeId)!;
      const cover: EngineCover = {
        kind: type.kind as CoverKind,
        name: type.name,
        availableWaterMm: Number(type.availableWaterMm),
        membranePassFraction: type.membranePassFraction === null ? null : Number(type.membranePassFraction),
        runoffCoefficientWet: Number(type.runoffCoefficientWet),
        runoffCoefficientDry: Number(type.runoffCoefficientDry),
        runoffDestination: type.runoffDestination,
        petFactor: Number(type.petFactor),
      };
      return {
        cellCode: record.cells.find((one) => one.id === row.cellId)!.code,
        plotName: record.plots.find((one) => one.id === row.plotId)!.name,
        plotId: row.plotId,
        coverName: cover.name,
        cover,
        month: row.month,
        fromOn: row.fromOn,
        dayCount: row.dayCount,
        areaM2: row.areaM2,
        runoffCoefficient: stepCover(cover, row.month, parameters).runoffCoefficient,
        terms: row.terms as StepTerms,
      };
    })
    .sort(
      (a, b) =>
        a.cellCode.localeCompare(b.cellCode) ||
        a.plotId.localeCompare(b.plotId) ||
        (a.fromOn < b.fromOn ? -1 : 1),
    );
}

/** Predicted and pumped of the whole site, month by month, for the charts. */
async function historyOf(
  tx: Transaction,
  record: SiteRecord,
  runId: string,
  last: Month,
): Promise<Quarter['history']> {
  const months = monthRange(addMonths(last, -11), last);
  const predicted = new Map<string, number>();
  for (const step of await balanceRepository.listSteps(tx, runId, months[0], last)) {
    const key = `${step.cellId} ${step.month}`;
    predicted.set(
      key,
      (predicted.get(key) ?? 0) + ((step.terms as StepTerms).leachateMm * step.areaM2) / 1000,
    );
  }
  const measured = await measuredByCell(tx, record, months[0]!, last, predicted);
  return months.flatMap((month) => {
    const cells = record.cells.filter((cell) => predicted.has(`${cell.id} ${month}`));
    const read = cells.flatMap((cell) => measured.get(`${cell.id} ${month}`) ?? []);
    return cells.length
      ? [
          {
            month,
            predictedM3: cells.reduce((sum, cell) => sum + predicted.get(`${cell.id} ${month}`)!, 0),
            measuredM3: read.length ? read.reduce((sum, one) => sum + one.volumeM3, 0) : null,
          },
        ]
      : [];
  });
}

async function daysOf(tx: Transaction, record: SiteRecord, months: Month[]): Promise<QuarterDay[]> {
  const entries = await entryRepository.listEntries(
    tx,
    record.site.id,
    firstDay(months[0]!),
    lastDay(months.at(-1)!),
  );
  const reversed = new Set(entries.map((one) => one.reversesId).filter(Boolean));
  const primary = new Map(
    record.sumps
      .filter((sump) => sump.kind === 'primary')
      .map((sump) => [sump.placeId, record.cells.find((cell) => cell.id === sump.cellId)!.code]),
  );
  const place = (id: string) => record.places.find((one) => one.id === id)?.name ?? '';
  return entries
    .filter((one) => one.reversesId === null && !reversed.has(one.id))
    .flatMap((one) => {
      const row = {
        meterCode: record.meters.find((meter) => meter.id === one.meterId)?.code ?? 'ticket',
        siteDay: one.siteDay,
        month: one.siteDay.slice(0, 7),
        basis: one.basis,
        volumeM3: Number(one.volumeM3),
        from: place(one.fromPlaceId),
        to: place(one.toPlaceId),
      };
      const out = primary.get(one.fromPlaceId);
      const into = primary.get(one.toPlaceId);
      const counted = [
        ...(out ? [{ ...row, cellCode: out, counts: 1 }] : []),
        ...(into ? [{ ...row, cellCode: into, counts: -1 }] : []),
      ];
      return counted.length ? counted : [{ ...row, cellCode: '', counts: 0 }];
    });
}

async function leakDetectionOf(
  tx: Transaction,
  record: SiteRecord,
  months: Month[],
): Promise<Quarter['leakDetection']> {
  const sums = await entryRepository.sumEntriesByMonth(
    tx,
    record.site.id,
    firstDay(months[0]!),
    lastDay(months.at(-1)!),
  );
  return record.sumps
    .filter((sump) => sump.kind === 'leak-detection')
    .flatMap((sump) =>
      months.map((month) => {
        const own = sums.filter((row) => row.fromPlaceId === sump.placeId && row.month === month);
        const volumeM3 = own.length ? own.reduce((sum, row) => sum + Number(row.volumeM3), 0) : null;
        const dayCount = daysInMonth(month);
        return {
          sumpCode: sump.code,
          month,
          volumeM3,
          dayCount,
          lPerHaDay:
            volumeM3 === null
              ? null
              : leakDetectionRate({ volumeM3, days: dayCount, areaM2: Number(sump.areaServedM2) }).lPerHaDay,
          actionRateLPerHaDay: sump.actionRateLPerHaDay === null ? null : Number(sump.actionRateLPerHaDay),
        };
      }),
    );
}

async function notesOf(
  tx: Transaction,
  record: SiteRecord,
  months: Month[],
  deps: Dependencies,
): Promise<Quarter['notes']> {
  const [first, last] = [firstDay(months[0]!), lastDay(months.at(-1)!)];
  const notes: Quarter['notes'] = [];
  for (const row of await listNotRead(tx, record.site.id, first, last)) {
    const point = record.roundPoints.find((one) => one.id === row.roundPointId);
    const name =
      record.meters.find((one) => one.id === point?.subjectId)?.name ??
      record.stores.find((one) => one.id === point?.subjectId)?.code ??
      'Round point';
    notes.push({
      when: row.siteDay,
      subject: name,
      sentence:
        `Not read: ${notReadReasonNames[row.reasonCode as 'frozen'].toLowerCase()}. ${row.note ?? ''}`.trim(),
    });
  }
  const adjustments = record.meters.length
    ? await listAdjustments(
        tx,
        record.meters.map((meter) => meter.id),
      )
    : [];
  for (const row of adjustments.filter(
    (one) => one.fromAt.slice(0, 10) <= last && one.toAt.slice(0, 10) >= first,
  )) {
    const code = record.meters.find((one) => one.id === row.meterId)!.code;
    notes.push({
      when: row.fromAt.slice(0, 10),
      subject: `Meter ${code}`,
      sentence: `Estimate of ${Number(row.volumeM3)} m³: ${(row.inputs as { text?: string } | null)?.text ?? row.method ?? ''}. ${row.reason ?? ''}`,
    });
  }
  for (const row of record.meterEvents.filter((one) => one.siteDay >= first && one.siteDay <= last)) {
    notes.push({
      when: row.siteDay,
      subject: `Meter ${record.meters.find((one) => one.id === row.meterId)!.code}`,
      sentence: `${row.kind.replace('-', ' ')}: ${row.registerBefore ?? ''} → ${row.registerAfter ?? ''} ${row.note ?? ''}`,
    });
  }
  for (const row of (await listSiteClimate(tx, record.site.id)).filter(
    (one) => months.includes(one.month) && !one.isComplete,
  )) {
    notes.push({
      when: row.month,
      subject: 'Climate',
      sentence: `${row.rainDayCount} of ${row.dayCount} days with rain, ${row.temperatureDayCount} with temperature. Choice: ${row.choice ?? 'none yet'}.`,
    });
  }
  for (const row of (await listNotes(tx, record.site.id)).filter((one) => months.includes(one.month))) {
    notes.push({
      when: row.month,
      subject: `Cell ${record.cells.find((one) => one.id === row.cellId)?.code ?? ''}`,
      sentence: `${row.state}: ${row.cause}. ${row.note}`,
    });
  }
  for (const row of (await entryRepository.listPendingChanges(tx, record.site.id)).filter((one) =>
    months.includes(one.month),
  ))
    notes.push({ when: row.month, subject: 'Waiting', sentence: row.sentence });
  notes.push({
    when: deps.now().toISOString().slice(0, 10),
    subject: 'Liquid in sumps',
    sentence: 'The change of liquid standing in the sumps is counted as 0.',
  });
  return notes.sort((a, b) => (a.when < b.when ? -1 : 1));
}

/** Collects the quarter from one transaction, so that all sheets agree with each other. */
export async function collectQuarter(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  quarter: string,
): Promise<Quarter> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const months = quarterMonths(quarter);
  const { run, isAccepted } = await predictionRun(tx, context, deps, record);
  if (run.problem) throw new Problem('balance-refused', run.problem);
  const set = (await balanceRepository.listParameterSets(tx, siteId)).find(
    (one) => one.id === run.parameterSetId,
  )!;
  const parameters = set.values as BalanceParameters;
  const steps = await stepsOf(tx, record, run.id, months, parameters);
  const predicted = new Map<string, { volumeM3: number; areaM2: number }>();
  for (const step of steps) {
    const key = `${record.cells.find((cell) => cell.code === step.cellCode)!.id} ${step.month}`;
    const known = predicted.get(key) ?? { volumeM3: 0, areaM2: 0 };
    predicted.set(key, {
      volumeM3: known.volumeM3 + (step.terms.leachateMm * step.areaM2) / 1000,
      areaM2: known.areaM2 + (step.areaM2 * step.dayCount) / daysInMonth(step.month),
    });
  }
  const measured = await measuredByCell(
    tx,
    record,
    months[0]!,
    months[2]!,
    new Map([...predicted].map(([key, one]) => [key, one.volumeM3])),
  );
  const days = await siteDaysOf(tx, siteId);
  const iso = (ms: number) => new Date(ms).toISOString();
  const [fromMs, toMs] = [
    days.startMs(firstDay(months[0]!)),
    days.startMs(firstDay(addMonths(months[2]!, 1))),
  ];
  const intervals: Quarter['intervals'] = [];
  for (const meter of record.meters) {
    const computed = await recomputeDays(
      tx,
      record,
      meter,
      days,
      iso(fromMs - 4 * 86_400_000),
      iso(toMs + 4 * 86_400_000),
    );
    intervals.push(
      ...computed.intervals
        .filter((one) => one.toMs > fromMs && one.fromMs < toMs)
        .map((one) => ({
          ...one,
          meterCode: meter.code,
          from: days.localTime(one.fromMs),
          to: days.localTime(one.toMs),
          hours: (one.toMs - one.fromMs) / 3_600_000,
        })),
    );
  }
  const ledgers = [];
  for (const month of months) ledgers.push(await readLedger(tx, context, month));
  const points = await listSamplePoints(tx, siteId);
  const analytes = await listAnalytes(tx);
  const laboratories = await listLaboratories(tx);
  const results = await listLiveResults(tx, siteId, firstDay(months[0]!), lastDay(months[2]!));
  return {
    site: record.site,
    quarter,
    months,
    dueOn: addDays(lastDay(months[2]!), record.site.reportDueDays),
    generatedAt: deps.now().toISOString(),
    run: {
      kind: run.kind,
      number: run.number,
      engineVersion: run.engineVersion,
      inputSha256: run.inputSha256,
      isAccepted,
    },
    parameters,
    parameterSet: `${set.name}, version ${set.version}${set.confirmedAt ? '' : ' (template, not confirmed)'}`,
    cells: record.cells.map((cell) => ({ code: cell.code, name: cell.name })),
    steps,
    cellMonths: record.cells.flatMap((cell) =>
      months.map((month) => {
        const key = `${cell.id} ${month}`;
        const own = measured.get(key);
        return {
          cellCode: cell.code,
          month,
          areaM2: predicted.get(key)?.areaM2 ?? 0,
          predictedM3: predicted.get(key)?.volumeM3 ?? 0,
          measuredM3: own?.volumeM3 ?? null,
          estimatedM3: own?.estimatedM3 ?? 0,
          allocatedM3: own?.allocatedM3 ?? 0,
        };
      }),
    ),
    history: await historyOf(tx, record, run.id, months[2]!),
    intervals,
    days: await daysOf(tx, record, months),
    stores: ledgers.flatMap((ledger) =>
      ledger.stores.map((store) => ({ month: ledger.month, name: store.name, balance: store.balance })),
    ),
    loads: ledgers.map((ledger) => ({
      month: ledger.month,
      count: ledger.loads.count,
      nominalM3: ledger.loads.nominalM3,
      receivedM3: ledger.loads.receivedM3,
    })),
    leakDetection: await leakDetectionOf(tx, record, months),
    verdicts: await judgeMonths(tx, siteId, months),
    results: results.map((row) => ({
      pointCode: points.find((one) => one.id === row.samplePointId)?.code ?? '',
      siteDay: row.siteDay,
      analyteName: analytes.find((one) => one.id === row.analyteId)?.name ?? '',
      fraction: row.fraction,
      comparator: row.comparator,
      value: row.value === null ? null : Number(row.value),
      unit: row.unit,
      laboratory: laboratories.find((one) => one.id === row.laboratoryId)?.name ?? '',
      file: `${row.sheet ?? ''} ${row.cell ?? ''}`.trim(),
      rawText: row.rawText,
      missingReason: row.missingReason,
      qualifier: row.qualifier,
    })),
    notes: await notesOf(tx, record, months, deps),
  };
}

/** The figures of the report page by name: what a later issue is compared with, and what the Checks sheet repeats. */
export function quarterFigures(quarter: Quarter): Record<string, number> {
  const figures: Record<string, number> = {};
  for (const cell of quarter.cells) {
    const own = quarter.cellMonths.filter((one) => one.cellCode === cell.code);
    for (const one of own) {
      figures[`${cell.code} predicted, ${monthName(one.month)}, m³`] = one.predictedM3;
      if (one.measuredM3 !== null)
        figures[`${cell.code} pumped, ${monthName(one.month)}, m³`] = one.measuredM3;
    }
    figures[`${cell.code} predicted, quarter, m³`] = own.reduce((sum, one) => sum + one.predictedM3, 0);
    figures[`${cell.code} pumped, quarter, m³`] = own.reduce((sum, one) => sum + (one.measuredM3 ?? 0), 0);
  }
  for (const one of quarter.verdicts) {
    if (one.verdict.valueText)
      figures[
        `${one.analyteName} at ${one.pointCode}, ${one.limit.quantity}, ${one.limit.statistic}, ${monthName(one.month)}, ${one.limit.unit}`
      ] = Number(one.verdict.valueText.replace('<', ''));
  }
  for (const one of quarter.leakDetection)
    if (one.lPerHaDay !== null)
      figures[`${one.sumpCode} leak-detection rate, ${monthName(one.month)}, L/ha·d`] = one.lPerHaDay;
  return figures;
}

export const quarterTitle = (quarter: Quarter): string =>
  `${quarter.site.name}, leachate, ${quarterName(quarter.quarter)}`;
export const dueWords = (quarter: Quarter, today: string): string => {
  const left = daysBetween(today, quarter.dueOn);
  return `${dayName(quarter.dueOn)}, ${left >= 0 ? `${left} days left` : `${-left} days late`}`;
};
