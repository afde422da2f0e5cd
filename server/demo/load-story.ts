import { addDays, firstDay, lastDay, monthOfDay } from '#shared/calendar/day.ts';
import { addMonths, monthRange, quarterMonths, type Month } from '#shared/calendar/month.ts';
import { tidyName, splitAnalyteText } from '#shared/lab/resolve-lab-rows.ts';
import type { Transaction } from '../db/transaction.ts';
import { sha256Of } from '../files/file-store.ts';
import { freezeRun, acceptRun } from '../features/balance/run-service.ts';
import { closeMonth, reopenMonth } from '../features/closings/closing-service.ts';
import { writeNote } from '../features/compare/compare-service.ts';
import { insertImport } from '../features/imports/import-repository.ts';
import {
  insertResults,
  listAnalytes,
  listLiveResults,
  listSamplePoints,
} from '../features/lab/lab-repository.ts';
import { openExceedances } from '../features/limits/exceedance-service.ts';
import { createLoadOut, voidLoadOut } from '../features/loads-out/load-out-service.ts';
import { signReport } from '../features/reports/report-service.ts';
import { createRoundNote } from '../features/readings/point-service.ts';
import type { DemoPlan } from './demo-plan.ts';
import { generateResults, resultsSheet, type DemoResult } from './demo-results.ts';
import type { DemoIds } from './demo-site.ts';
import type { DemoActors } from './demo-actors.ts';
import type { Random } from './random.ts';

/** A month's results with the kept sheet they came in. */
async function storeMonth(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  laboratoryId: string,
  random: Random,
  month: Month,
  results: readonly DemoResult[],
  receivedAt: string,
): Promise<void> {
  const lab = actors.as('lab', ids.site);
  const deps = actors.at(receivedAt);
  const points = await listSamplePoints(tx, ids.site);
  const analytes = await listAnalytes(tx);
  const { csv, firstRow } = resultsSheet(results, month);
  const bytes = Buffer.from(csv, 'utf8');
  const importId = random.id();
  await deps.files.put(bytes);
  const counts = { read: results.length + 1, ok: results.length, warned: 0, held: 0, skipped: 1 };
  await insertImport(tx, {
    organisationId: lab.organisationId,
    id: importId,
    siteId: ids.site,
    kind: 'lab',
    laboratoryId,
    fileName: `pellam-varrow-${month}.csv`,
    fileSha256: sha256Of(bytes),
    byteCount: bytes.length,
    jobNumber: `${month.slice(2, 4)}-${month.slice(5)}07`,
    reading: {
      shape: 'long-list',
      notes: [],
      skipped: [],
      qualifierKey: [],
      preview: [],
      sheetName: 'Sheet',
      headerRow: 4,
      jobNumber: null,
      dateOrder: null,
    },
    counts,
    uploadedById: lab.personId,
    uploadedAt: receivedAt,
    confirmedById: lab.personId,
    confirmedAt: receivedAt,
  });
  await insertResults(
    tx,
    results.map((one, index) => {
      const split = splitAnalyteText(one.analyte);
      const analyte = analytes.find((row) => tidyName(row.name) === tidyName(split.name))!;
      const isBelow = one.text.startsWith('<');
      const value = isBelow ? one.text.slice(1) : one.text;
      return {
        organisationId: lab.organisationId,
        id: random.id(),
        recordedById: lab.personId,
        recordedAt: receivedAt,
        siteId: ids.site,
        samplePointId: points.find((row) => row.code === one.point)!.id,
        analyteId: analyte.id,
        fraction: split.fraction || (analyte.defaultFraction ?? ''),
        laboratoryId,
        importId,
        sheet: 'Sheet',
        cell: `D${firstRow + index}`,
        sampledOn: one.day,
        siteDay: one.day,
        rawText: one.text,
        rawUnit: one.unit,
        comparator: isBelow ? ('<' as const) : ('=' as const),
        value,
        unit: one.unit === 'pH' ? 'pH' : 'mg/L',
        reportingLimit: one.limit || null,
        printedDecimals: value.split('.')[1]?.length ?? 0,
      };
    }),
  );
}

/** Everything that people decided: closings, runs, a report, a revision, an exceedance, a doubled ticket. */
export async function tellStory(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
  laboratoryId: string,
  random: Random,
): Promise<void> {
  const [engineer, manager, operator, supervisor] = (
    ['engineer', 'manager', 'operator', 'supervisor'] as const
  ).map((role) => actors.as(role, ids.site)) as [
    ReturnType<DemoActors['as']>,
    ReturnType<DemoActors['as']>,
    ReturnType<DemoActors['as']>,
    ReturnType<DemoActors['as']>,
  ];
  const results = generateResults(random, plan);
  const now = actors.at(`${plan.today}T00:00:00Z`).now();
  const earliest = (wanted: string) =>
    Date.parse(wanted) < Date.parse(`${plan.today}T06:30:00Z`)
      ? wanted
      : `${addDays(plan.today, -1)}T16:00:00Z`;
  for (const month of monthRange(plan.firstMonth, plan.anchor)) {
    const own = results.filter((one) => one.month === month);
    if (own.length)
      await storeMonth(
        tx,
        actors,
        ids,
        laboratoryId,
        random,
        month,
        own,
        earliest(`${addDays(lastDay(month), 9)}T14:10:00Z`),
      );
  }
  const doubled = {
    ticket: '004417',
    hauler: 'Dunmere Haul.',
    truck: 'T1',
    fromPlaceId: ids.pond.place,
    toPlaceId: ids.places.haulage,
    nominalVolumeM3: '20.8',
    grossMassKg: undefined,
    tareMassKg: undefined,
    densityKgPerM3: undefined,
    receivedVolumeM3: undefined,
    officialVolume: 'nominal' as const,
    isConfirmed: true,
  };
  const doubledId = random.id();
  await createLoadOut(tx, operator, actors.at(`${plan.doubledTicketDay}T16:00:00Z`), {
    ...doubled,
    id: doubledId,
    observedAt: `${plan.doubledTicketDay}T15:10:00Z`,
  });
  await voidLoadOut(tx, supervisor, actors.at(`${addDays(plan.doubledTicketDay, 2)}T09:00:00Z`), doubledId, {
    id: random.id(),
    reason: 'Ticket 004417 was entered twice, under two spellings of the hauler.',
  });

  const issuedMonths = quarterMonths(plan.issuedQuarter);
  const signDay = addDays(lastDay(issuedMonths[2]!), 26);
  await freezeAndAccept(
    tx,
    actors,
    ids,
    random,
    addDays(lastDay(issuedMonths[2]!), 10),
    'For the quarter’s report.',
  );
  for (const month of monthRange(plan.firstMonth, addMonths(plan.anchor, -2))) {
    await closeMonth(tx, engineer, actors.at(earliest(`${addDays(lastDay(month), 12)}T11:00:00Z`)), month, {
      id: random.id(),
      reason: undefined,
    });
  }
  await writeNote(tx, engineer, actors.at(`${signDay}T08:00:00Z`), {
    id: random.id(),
    cellId: ids.cells.C3,
    month: issuedMonths[2]!,
    cause: 'waste storage filling (young cell)',
    state: 'explained',
    note: 'Fresh waste of the last lift takes up water; the model starts nearer to field capacity.',
  });
  await openExceedances(tx, manager, actors.at(`${signDay}T08:30:00Z`), [...issuedMonths]);
  await signReport(tx, manager, actors.at(`${signDay}T09:00:00Z`), plan.issuedQuarter, {
    id: random.id(),
    isConfirmed: true,
    reason: 'Open questions are explained in the notes.',
  });
  await reviseZinc(tx, actors, ids, plan, laboratoryId, random, addDays(signDay, 12));
  await reopenMonth(tx, manager, actors.at(`${addDays(signDay, 13)}T10:00:00Z`), issuedMonths[2]!, {
    id: random.id(),
    reason: 'The laboratory revised a zinc result after the report was issued.',
  });
  await freezeAndAccept(tx, actors, ids, random, addDays(firstDay(plan.anchor), 0), 'All complete months.');

  const seenAt = new Date(now.getTime() - 6 * 3_600_000).toISOString();
  await openExceedances(tx, engineer, actors.at(seenAt), [monthOfDay(plan.exceedanceDay)]);
  await createRoundNote(tx, operator, actors.at(`${addDays(plan.today, -1)}T08:40:00Z`), {
    id: random.id(),
    siteDay: addDays(plan.today, -1),
    note: 'S3 pump noisy on start. Gate at L3 blocked by a delivery until ten. Do not touch valve V4.',
  });
}

async function freezeAndAccept(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  random: Random,
  day: string,
  note: string,
): Promise<void> {
  const engineer = actors.as('engineer', ids.site);
  const deps = actors.at(`${day}T15:00:00Z`);
  const run = await freezeRun(tx, engineer, deps, { id: random.id(), note });
  await acceptRun(tx, engineer, deps, run.id);
}

/** After the issue the laboratory revises one zinc result from below detection to 0.18 mg/L. */
async function reviseZinc(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
  laboratoryId: string,
  random: Random,
  day: string,
): Promise<void> {
  const lab = actors.as('lab', ids.site);
  const last = quarterMonths(plan.issuedQuarter)[2]!;
  const zinc = (await listAnalytes(tx)).find((one) => one.code === 'zinc')!;
  const live = (await listLiveResults(tx, ids.site, firstDay(last), lastDay(last))).filter(
    (one) => one.analyteId === zinc.id,
  );
  const old = live.find((one) => one.comparator === '<') ?? live[0];
  if (!old) return;
  const { sequence: _sequence, ...copy } = old;
  await insertResults(tx, [
    {
      ...copy,
      id: random.id(),
      recordedById: lab.personId,
      recordedAt: `${day}T13:00:00Z`,
      laboratoryId,
      comparator: '=',
      value: '0.18',
      rawText: '0.18',
      supersedesId: old.id,
      reason: 'Revised by the laboratory',
    },
  ]);
}
