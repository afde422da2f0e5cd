import { addDays, firstDay, lastDay, monthOfDay } from '#shared/calendar/day.ts';
import { addMonths, monthRange, quarterMonths } from '#shared/calendar/month.ts';
import type { Transaction } from '../db/transaction.ts';
import { freezeRun, acceptRun } from '../features/balance/run-service.ts';
import { closeMonth, reopenMonth } from '../features/closings/closing-service.ts';
import { writeNote } from '../features/compare/compare-service.ts';
import { confirmResults, uploadResults } from '../features/lab/lab-import-service.ts';
import { openExceedances } from '../features/limits/exceedance-service.ts';
import { createLoadOut, voidLoadOut } from '../features/loads-out/load-out-service.ts';
import { signReport } from '../features/reports/report-service.ts';
import { createRoundNote } from '../features/readings/point-service.ts';
import type { Context, Dependencies } from '../http/route.ts';
import type { DemoPlan } from './demo-plan.ts';
import { generateResults, resultsSheet, type DemoResult } from './demo-results.ts';
import type { DemoIds } from './demo-site.ts';
import type { DemoActors } from './demo-actors.ts';
import type { Random } from './random.ts';

/** A month's sheet as the laboratory sends it, by the same way as every other: kept, read, staged, written. */
async function sendSheet(
  tx: Transaction,
  lab: Context,
  deps: Dependencies,
  results: readonly DemoResult[],
  revision = 0,
): Promise<void> {
  const id = deps.newId();
  const month = results[0]!.month;
  const name = `pellam-varrow-${month}${revision ? `-revision-${revision}` : ''}.csv`;
  const bytes = Buffer.from(resultsSheet(results, month, revision), 'utf8');
  const { counts } = await uploadResults(
    tx,
    lab,
    deps,
    { id, laboratoryId: lab.laboratoryId! },
    { name, bytes },
  );
  if (counts.held) throw new Error(`${counts.held} rows of the demo's ${name} are held`);
  await confirmResults(tx, lab, deps, id);
}

/** Everything that people decided: closings, runs, a report, a revision, an exceedance, a doubled ticket. */
export async function tellStory(
  tx: Transaction,
  actors: DemoActors,
  ids: DemoIds,
  plan: DemoPlan,
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
  const lab = actors.as('lab', ids.site);
  const seenAt = new Date(now.getTime() - 6 * 3_600_000).toISOString();
  for (const month of monthRange(plan.firstMonth, plan.anchor)) {
    const own = results.filter((one) => one.month === month);
    const sentAt = earliest(`${addDays(lastDay(month), 9)}T14:10:00Z`);
    const isLatest = month === monthOfDay(plan.exceedanceDay);
    if (own.length) await sendSheet(tx, lab, actors.at(isLatest ? seenAt : sentAt), own);
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
    cause: 'condensate, wash water or tank-farm rain',
    state: 'explained',
    note: 'The header was flushed on two days; the water went through the sump and stands in the shift notes.',
  });
  await openExceedances(tx, manager, actors.at(`${signDay}T08:30:00Z`), [...issuedMonths]);
  await signReport(tx, manager, actors.at(`${signDay}T09:00:00Z`), plan.issuedQuarter, {
    id: random.id(),
    isConfirmed: true,
    reason: 'Open questions are explained in the notes.',
  });
  await sendSheet(
    tx,
    lab,
    actors.at(`${addDays(signDay, 12)}T13:00:00Z`),
    reviseZinc(results.filter((one) => one.month === issuedMonths[2])),
    1,
  );
  await reopenMonth(tx, manager, actors.at(`${addDays(signDay, 13)}T10:00:00Z`), issuedMonths[2]!, {
    id: random.id(),
    reason: 'The laboratory revised a zinc result after the report was issued.',
  });
  await freezeAndAccept(tx, actors, ids, random, addDays(firstDay(plan.anchor), 0), 'All complete months.');

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
function reviseZinc(results: readonly DemoResult[]): DemoResult[] {
  const zinc = results.filter((one) => one.analyte.startsWith('Zinc'));
  const old = zinc.find((one) => one.text.startsWith('<')) ?? zinc[0];
  return results.map((one) => (one === old ? { ...one, text: '0.18' } : one));
}
