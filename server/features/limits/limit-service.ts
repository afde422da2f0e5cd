import type * as z from 'zod';
import { quarterMonths, quarterOf, type Month } from '#shared/calendar/month.ts';
import { Problem, fieldProblem, type FieldProblem } from '#shared/problems.ts';
import type { limitInput, permitInput } from '#shared/schemas/lab.ts';
import type { LimitChoicesView, LimitsView } from '#shared/views/lab-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { listAnalytes, listSamplePoints } from '../lab/lab-repository.ts';
import { listNames } from '../people/people-repository.ts';
import { readSite, siteOf } from '../sites/site-service.ts';
import * as repository from './limit-repository.ts';
import { standingKeys } from './exceeded-periods.ts';
import { judgeMonths } from './verdict-service.ts';

export async function createPermit(tx: Transaction, context: Context, input: z.output<typeof permitInput>) {
  await repository.insertPermit(tx, {
    organisationId: context.organisationId,
    siteId: siteOf(context),
    ...input,
    toOn: input.toOn ?? null,
  });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'permits',
    subjectId: input.id,
    sentence: `Permit ${input.number} was entered.`,
    after: input,
  });
  return { id: input.id };
}

/** Enters a limit from the permit's text. It is a template until the manager confirms it. */
export async function createLimit(tx: Transaction, context: Context, input: z.output<typeof limitInput>) {
  const siteId = siteOf(context);
  const permit = (await repository.listPermits(tx, siteId)).find((one) => one.id === input.permitId);
  const errors: FieldProblem[] = [];
  if (!permit) throw fieldProblem('/permitId', 'Choose a permit of this site.');
  if (input.fromOn < permit.fromOn)
    errors.push({
      pointer: '/fromOn',
      detail: `The permit begins on ${permit.fromOn}; the limit cannot begin before it.`,
    });
  if (!(await listSamplePoints(tx, siteId)).some((one) => one.id === input.samplePointId))
    errors.push({ pointer: '/samplePointId', detail: 'Choose a sample point of this site.' });
  const analyte = (await listAnalytes(tx)).find((one) => one.id === input.analyteId);
  if (!analyte) errors.push({ pointer: '/analyteId', detail: 'Choose a parameter.' });
  else if (input.quantity === 'concentration' && input.unit !== analyte.standardUnit)
    errors.push({
      pointer: '/unit',
      detail: `${analyte.name} is kept in ${analyte.standardUnit}. Enter the limit in that unit.`,
    });
  if (input.flowPlaceId && !(await readSite(tx, siteId)).places.some((one) => one.id === input.flowPlaceId))
    errors.push({ pointer: '/flowPlaceId', detail: 'Choose a place of this site.' });
  if (errors.length) throw new Problem('fields-need-another-look', errors[0]!.detail, errors);
  await repository.insertLimits(tx, [
    {
      organisationId: context.organisationId,
      ...input,
      flowPlaceId: input.flowPlaceId ?? null,
      valueText: input.valueText ?? null,
      lowText: input.lowText ?? null,
      highText: input.highText ?? null,
      noticeHours: input.noticeHours ?? null,
      writtenNoticeDays: input.writtenNoticeDays ?? null,
      resampleDays: input.resampleDays ?? null,
      toOn: input.toOn ?? null,
    },
  ]);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'limits',
    subjectId: input.id,
    sentence: `Limit for ${analyte!.name} was entered: ${input.valueText ?? `${input.lowText} to ${input.highText}`} ${input.unit}.`,
    after: input,
  });
  return { id: input.id };
}

export async function confirmLimit(tx: Transaction, context: Context, deps: Dependencies, limitId: string) {
  const permits = await repository.listPermits(tx, siteOf(context));
  const limit = (
    await repository.listLimits(
      tx,
      permits.map((one) => one.id),
    )
  ).find((one) => one.id === limitId);
  if (!limit) throw new Problem('not-found', 'There is no such limit at this site.');
  if (limit.confirmedAt) throw new Problem('already-done', 'This limit was confirmed already.');
  await repository.confirmLimit(tx, limitId, context.personId, deps.now().toISOString());
  await recordChange(tx, context, {
    action: 'confirm',
    subjectType: 'limits',
    subjectId: limitId,
    sentence: `The limit ${limit.valueText ?? `${limit.lowText} to ${limit.highText}`} ${limit.unit} (${limit.citation}) was confirmed against the permit.`,
    after: limit,
  });
  return { id: limitId };
}

/** Limits of the quarter that holds the month: every verdict with its working, exceedances with their clocks. */
export async function readLimits(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  month: Month,
): Promise<LimitsView> {
  const siteId = siteOf(context);
  const months = quarterMonths(quarterOf(month)).filter((one) => one <= month);
  const names = await listNames(tx);
  const permits = await repository.listPermits(tx, siteId);
  const exceedances = await repository.listExceedances(tx, siteId);
  const open = exceedances.filter((one) => one.closedAt === null).map((one) => one.month);
  const all = await judgeMonths(tx, siteId, [...new Set([...open, ...months])].sort());
  const judged = all.filter((one) => months.includes(one.month));
  const standing = standingKeys(all);
  const ids = exceedances.map((one) => one.id);
  const clocks = await repository.listClocks(tx, ids);
  const notes = await repository.listExceedanceNotes(tx, ids);
  return {
    quarter: quarterOf(month),
    months,
    now: deps.now().toISOString(),
    permits,
    verdicts: judged.map(({ limit, ...rest }) => ({
      ...rest,
      limit: { ...limit, confirmedBy: limit.confirmedById ? (names.get(limit.confirmedById) ?? '') : null },
    })),
    exceedances: exceedances.map((one) => ({
      ...one,
      seenBy: names.get(one.seenById) ?? '',
      isStanding: one.closedAt !== null || standing.has(`${one.limitId} ${one.periodKey}`),
      clocks: clocks
        .filter((clock) => clock.exceedanceId === one.id)
        .map((clock) => ({ ...clock, doneBy: clock.doneById ? (names.get(clock.doneById) ?? '') : null })),
      notes: notes
        .filter((note) => note.exceedanceId === one.id)
        .map((note) => ({ ...note, by: names.get(note.writtenById) ?? '' })),
    })),
  };
}

/** Everything a limit form needs to choose from. */
export async function readLimitChoices(tx: Transaction, context: Context): Promise<LimitChoicesView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  return {
    permits: await repository.listPermits(tx, siteId),
    samplePoints: await listSamplePoints(tx, siteId),
    analytes: await listAnalytes(tx),
    places: record.places,
  };
}
