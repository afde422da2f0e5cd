import { asc, eq } from 'drizzle-orm';
import type * as z from 'zod';
import { counted } from '#shared/count-words.ts';
import { dayName, monthOfDay } from '#shared/calendar/day.ts';
import { monthName, quarterName } from '#shared/calendar/month.ts';
import { Problem } from '#shared/problems.ts';
import type { signReportInput } from '#shared/schemas/lab.ts';
import type { ReportView } from '#shared/views/lab-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import { checkTrail, sealTrail } from '../../audit/trail-seals.ts';
import { reports } from '../../db/schema/reporting.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sha256Of } from '../../files/file-store.ts';
import { FileAnswer, type Context, type Dependencies } from '../../http/route.ts';
import { writeQuarterlyWorkbook } from '../../spreadsheets/write-quarterly-workbook.ts';
import { listClosedMonths, lockSiteLedger } from '../ledger/entry-repository.ts';
import { listExceedances } from '../limits/limit-repository.ts';
import * as importRepository from '../imports/import-repository.ts';
import { listNotes } from '../compare/compare-service.ts';
import { compareTolerance } from '#shared/reconciliation/tolerance.ts';
import { listAddresses, listNames } from '../people/people-repository.ts';
import { siteDaysOf, siteOf } from '../sites/site-service.ts';
import type { Quarter } from './quarter.ts';
import { dueWords, quarterFigures } from './quarter-figures.ts';
import { collectQuarter } from './quarter-service.ts';

const workbookType = 'application/vnd.openxmlformats-officedocument.spreadsheetml.sheet';

type ReadinessLine = ReportView['readiness'][number];

const listReports = (tx: Transaction, siteId: string) =>
  tx
    .select()
    .from(reports)
    .where(eq(reports.siteId, siteId))
    .orderBy(asc(reports.quarter), asc(reports.issue));

/** Figures that would be printed differently now than in an issue: volumes in whole m³, rates to 0.1, values as judged. */
export function changedFigures(
  issued: Record<string, number>,
  now: Record<string, number>,
): { name: string; issued: number; now: number }[] {
  const printed = (name: string, value: number | undefined) =>
    value === undefined
      ? 'none'
      : name.endsWith('m³')
        ? value.toFixed(0)
        : name.endsWith('L/ha·d')
          ? value.toFixed(1)
          : String(value);
  return [...new Set([...Object.keys(issued), ...Object.keys(now)])]
    .filter((name) => printed(name, issued[name]) !== printed(name, now[name]))
    .map((name) => ({ name, issued: issued[name] ?? NaN, now: now[name] ?? NaN }));
}

async function readinessOf(tx: Transaction, siteId: string, quarter: Quarter): Promise<ReadinessLine[]> {
  const lines: ReadinessLine[] = [];
  const closed = await listClosedMonths(tx, siteId);
  for (const month of quarter.months) {
    if (!closed.has(month))
      lines.push({ state: 'stops', sentence: `${monthName(month)} is not closed.`, link: `month/${month}` });
  }
  if (quarter.months.every((month) => closed.has(month)))
    lines.push({ state: 'ready', sentence: 'All three months are closed.', link: null });
  if (!quarter.run.isAccepted)
    lines.push({
      state: 'ask',
      sentence: 'No frozen run is accepted: the report would use the working run.',
      link: `balance/${quarter.months[2]}`,
    });
  const notes = await listNotes(tx, siteId);
  for (const month of quarter.months) {
    const without = quarter.cellMonths.filter(
      (one) => one.month === month && one.isOpen && one.predictedM3 === null,
    );
    if (without.length)
      lines.push({
        state: 'stops',
        sentence: `There is no prediction for ${monthName(month)}: the balance does not reach it. Freeze and accept a run that does.`,
        link: `balance/${month}`,
      });
  }
  for (const one of quarter.cellMonths.filter((row) => row.isOpen)) {
    if (one.measuredM3 === null)
      lines.push({
        state: 'ask',
        sentence: `${one.cellCode}: nothing was measured in ${monthName(one.month)}.`,
        link: `ledger/${one.month}`,
      });
    else if (one.predictedM3 !== null) {
      const difference = one.measuredM3 - one.predictedM3;
      const tolerance = compareTolerance({
        predictedM3: one.predictedM3,
        measuredM3: one.measuredM3,
        areaM2: one.areaM2,
      });
      const explained = notes.some(
        (note) => note.cellId === one.cellId && note.month === one.month && note.state !== 'open',
      );
      if (Math.abs(difference) > tolerance.valueM3 && !explained)
        lines.push({
          state: 'ask',
          sentence: `${one.cellCode} pumped ${Math.abs(difference).toFixed(0)} m³ ${difference > 0 ? 'more' : 'less'} than predicted in ${monthName(one.month)}, without an explanation.`,
          link: `compare/${one.month}?cell=${one.cellCode}`,
        });
    }
  }
  const open = (await listExceedances(tx, siteId)).filter(
    (one) => quarter.months.includes(one.month) && one.closedAt === null,
  );
  for (const one of open)
    lines.push({
      state: 'ask',
      sentence: `Exceedance still open: ${one.sentence}`,
      link: `limits/${one.month}`,
    });
  const undecided = quarter.verdicts.filter(
    (one) => one.verdict.word === 'incomplete' || one.verdict.word === 'cannot be judged',
  );
  if (undecided.length)
    lines.push({
      state: 'ask',
      sentence: `${counted(undecided.length, 'verdict is', 'verdicts are')} incomplete or cannot be judged.`,
      link: `limits/${quarter.months[2]}`,
    });
  const held = (await importRepository.listImports(tx, siteId, 'lab', null)).filter(
    (one) =>
      !one.undoneAt &&
      (one.counts as { held?: number }).held &&
      quarter.months.includes(monthOfDay(one.uploadedAt.slice(0, 10))),
  );
  if (held.length)
    lines.push({
      state: 'ask',
      sentence: `${counted(
        held.reduce((sum, one) => sum + (one.counts as { held: number }).held, 0),
        'laboratory row is',
        'laboratory rows are',
      )} held.`,
      link: `lab/${quarter.months[2]}`,
    });
  const estimated = quarter.cellMonths.reduce((sum, one) => sum + one.estimatedM3, 0);
  const pumped = quarter.cellMonths.reduce((sum, one) => sum + (one.measuredM3 ?? 0), 0);
  if (estimated > 0)
    lines.push({
      state: 'ask',
      sentence: `${((100 * estimated) / pumped).toFixed(1)} % of the pumped volume is estimated. It is marked in the workbook by letter and hatching.`,
      link: `ledger/${quarter.months[0]}`,
    });
  const order = ['stops', 'ask', 'ready'];
  return lines.sort((a, b) => order.indexOf(a.state) - order.indexOf(b.state));
}

/** Whether the quarter can be signed, what it will say, and the issues there are. */
export async function readReport(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  quarterKey: string,
): Promise<ReportView> {
  const siteId = siteOf(context);
  const quarter = await collectQuarter(tx, context, deps, quarterKey);
  const today = (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
  const names = await listNames(tx);
  const figures = quarterFigures(quarter);
  const issued = await listReports(tx, siteId);
  const own = issued.filter((one) => one.quarter === quarterKey);
  const last = own.at(-1);
  return {
    quarter: quarterKey,
    name: quarterName(quarterKey),
    dueOn: quarter.dueOn,
    due: dueWords(quarter, today),
    certification: quarter.site.certificationText,
    readiness: await readinessOf(tx, siteId, quarter),
    cells: quarter.cells,
    months: quarter.months,
    cellMonths: quarter.cellMonths,
    verdicts: quarter.verdicts.map((one) => ({
      analyteName: one.analyteName,
      pointCode: one.pointCode,
      month: one.month,
      statistic: one.limit.statistic,
      quantity: one.limit.quantity,
      limit: one.limit.valueText ?? `${one.limit.lowText} to ${one.limit.highText}`,
      unit: one.limit.unit,
      valueText: one.verdict.valueText,
      word: one.verdict.word,
    })),
    leakDetection: quarter.leakDetection,
    run: quarter.run,
    changes: last ? changedFigures(last.snapshot as Record<string, number>, figures) : [],
    issues: issued.map((one) => ({
      id: one.id,
      quarter: one.quarter,
      issue: one.issue,
      signedAt: one.signedAt,
      signedBy: names.get(one.signedById) ?? '',
      fileName: one.fileName,
      fileSha256: one.fileSha256,
      isStale:
        one.id === last?.id && changedFigures(one.snapshot as Record<string, number>, figures).length > 0,
      isLast: !issued.some((other) => other.quarter === one.quarter && other.issue > one.issue),
    })),
  };
}

const fileNameOf = (quarter: Quarter, issue: string) =>
  `${quarter.site.slug}-${quarter.quarter.toLowerCase()}-${issue}.xlsx`;

/** The workbook as it would look now, unsigned. */
export async function previewReport(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  quarterKey: string,
): Promise<FileAnswer> {
  const quarter = await collectQuarter(tx, context, deps, quarterKey);
  const snapshotSha256 = sha256Of(JSON.stringify(quarterFigures(quarter)));
  const bytes = await writeQuarterlyWorkbook(quarter, {
    issue: null,
    signedBy: null,
    signedAt: null,
    certification: null,
    reason: null,
    trailHead: null,
    changes: [],
    snapshotSha256,
  });
  return new FileAnswer(bytes, fileNameOf(quarter, 'preview'), workbookType);
}

/** Signs and issues the quarter with the permit's own words; the exact bytes are kept. */
export async function signReport(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  quarterKey: string,
  input: z.output<typeof signReportInput>,
) {
  const siteId = siteOf(context);
  await lockSiteLedger(tx, siteId);
  const quarter = await collectQuarter(tx, context, deps, quarterKey);
  const readiness = await readinessOf(tx, siteId, quarter);
  const stops = readiness.filter((line) => line.state === 'stops');
  if (stops.length) throw new Problem('not-ready', stops.map((line) => line.sentence).join(' '));
  if (readiness.some((line) => line.state === 'ask') && !input.reason) {
    const detail = 'Something is still open. Give the reason why the report is signed all the same.';
    throw new Problem('fields-need-another-look', detail, [{ pointer: '/reason', detail }]);
  }
  const certification = quarter.site.certificationText;
  if (!certification)
    throw new Problem(
      'not-ready',
      'The words of the certification are not entered yet. Enter the permit’s own text under Site, settings; nothing is worded by the program.',
    );
  const before = (await listReports(tx, siteId)).filter((one) => one.quarter === quarterKey);
  const issue = before.length;
  const figures = quarterFigures(quarter);
  const changes = before.length
    ? changedFigures(before.at(-1)!.snapshot as Record<string, number>, figures)
    : [];
  if (before.length && !changes.length)
    throw new Problem(
      'already-done',
      `Issue ${issue - 1} of ${quarterName(quarterKey)} says the same. There is nothing to issue again.`,
    );
  const signedAt = deps.now().toISOString();
  const signedBy = (await listNames(tx)).get(context.personId) ?? '';
  const snapshotSha256 = sha256Of(JSON.stringify(figures));
  await recordChange(tx, context, {
    action: 'sign',
    subjectType: 'reports',
    subjectId: input.id,
    sentence: `${quarterName(quarterKey)}, issue ${issue}, was signed and issued.`,
    reason: input.reason,
    after: { snapshotSha256, changes },
  });
  await sealTrail(tx, context.organisationId);
  const { headHash } = await checkTrail(tx, context.organisationId);
  const bytes = await writeQuarterlyWorkbook(quarter, {
    issue,
    signedBy,
    signedAt,
    certification,
    reason: input.reason ?? null,
    trailHead: headHash,
    changes,
    snapshotSha256,
  });
  const fileSha256 = await deps.files.put(bytes);
  await tx.insert(reports).values({
    organisationId: context.organisationId,
    id: input.id,
    siteId,
    quarter: quarterKey,
    issue,
    fileName: fileNameOf(quarter, `issue-${issue}`),
    fileSha256,
    snapshotSha256,
    snapshot: figures,
    changes,
    signedById: context.personId,
    signedAt,
    certification,
    trailHash: headHash,
  });
  for (const to of await listAddresses(tx, siteId, ['manager', 'engineer', 'auditor'])) {
    await deps.mail.send(tx, {
      to,
      subject: `${quarter.site.name}: report for ${quarterName(quarterKey)}, issue ${issue}`,
      text: `${signedBy} signed the report on ${dayName(signedAt.slice(0, 10))}.\n\nFile: ${fileNameOf(quarter, `issue-${issue}`)}\nSHA-256: ${fileSha256}\nTrail: ${headHash}`,
    });
  }
  return { id: input.id, issue };
}

/** An issued workbook, byte for byte as it was signed. */
export async function downloadReport(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  reportId: string,
): Promise<FileAnswer> {
  const row = (await listReports(tx, siteOf(context))).find((one) => one.id === reportId);
  if (!row) throw new Problem('not-found', 'There is no such issue at this site.');
  return new FileAnswer(await deps.files.get(row.fileSha256), row.fileName, workbookType);
}
