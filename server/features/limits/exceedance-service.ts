import type * as z from 'zod';
import type { Month } from '#shared/calendar/month.ts';
import { Problem } from '#shared/problems.ts';
import type { clockDoneInput, exceedanceCloseInput, exceedanceNoteInput } from '#shared/schemas/lab.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { listAddresses } from '../people/people-repository.ts';
import { findSite } from '../sites/site-repository.ts';
import { siteOf } from '../sites/site-service.ts';
import { exceededPeriods } from './exceeded-periods.ts';
import * as repository from './limit-repository.ts';
import { judgeMonths, type JudgedLimit } from './verdict-service.ts';

const hourMs = 3_600_000;

function clocksOf(limit: JudgedLimit['limit'], seenMs: number): { step: string; dueMs: number }[] {
  return [
    ...(limit.noticeHours
      ? [{ step: 'Tell the authority', dueMs: seenMs + limit.noticeHours * hourMs }]
      : []),
    ...(limit.writtenNoticeDays
      ? [{ step: 'Written notice', dueMs: seenMs + limit.writtenNoticeDays * 24 * hourMs }]
      : []),
    ...(limit.resampleDays
      ? [{ step: 'Repeat sample, result in', dueMs: seenMs + limit.resampleDays * 24 * hourMs }]
      : []),
  ];
}

/**
 * Opens an exceedance for every exceeded period that has none yet; the clocks start now, when someone became aware.
 * Those who must know get one mail each.
 * @returns how many were opened
 */
export async function openExceedances(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  months: Month[],
): Promise<number> {
  const siteId = siteOf(context);
  const seenAt = deps.now();
  const sentences: string[] = [];
  for (const judged of await judgeMonths(tx, siteId, [...months].sort())) {
    for (const { periodKey, sentence } of exceededPeriods(judged)) {
      const id = deps.newId();
      const isNew = await repository.insertExceedance(tx, {
        organisationId: context.organisationId,
        id,
        siteId,
        limitId: judged.limit.id,
        periodKey,
        month: judged.month,
        sentence,
        seenAt: seenAt.toISOString(),
        seenById: context.personId,
      });
      if (!isNew) continue;
      const clocks = clocksOf(judged.limit, seenAt.getTime());
      if (clocks.length) {
        await repository.insertClocks(
          tx,
          clocks.map((clock) => ({
            organisationId: context.organisationId,
            id: deps.newId(),
            exceedanceId: id,
            step: clock.step,
            dueAt: new Date(clock.dueMs).toISOString(),
            citation: judged.limit.citation,
          })),
        );
      }
      await recordChange(tx, context, {
        action: 'open',
        subjectType: 'exceedances',
        subjectId: id,
        sentence: `Exceedance: ${sentence}`,
        after: { limitId: judged.limit.id, periodKey },
      });
      sentences.push(sentence);
    }
  }
  if (sentences.length) {
    const site = await findSite(tx, siteId);
    for (const to of await listAddresses(tx, siteId, ['manager', 'engineer'])) {
      await deps.mail.send(tx, {
        to,
        subject: `${site?.name}: ${sentences.length === 1 ? 'a limit was exceeded' : `${sentences.length} limits were exceeded`}`,
        text: [
          ...sentences,
          'The clocks of the permit run from now. Open Limits to see what is due and to record what was done:',
          `${deps.publicUrl}/sites/${site?.slug}/limits/${[...months].sort().at(-1)}`,
          'A computed exceedance is not a compliance determination: the permit and the laboratory’s report govern.',
        ].join('\n\n'),
      });
    }
  }
  return sentences.length;
}

async function openExceedance(tx: Transaction, context: Context, id: string) {
  const row = (await repository.listExceedances(tx, siteOf(context))).find((one) => one.id === id);
  if (!row) throw new Problem('not-found', 'There is no such exceedance at this site.');
  return row;
}

export async function finishClock(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  exceedanceId: string,
  clockId: string,
  input: z.output<typeof clockDoneInput>,
) {
  const row = await openExceedance(tx, context, exceedanceId);
  const clock = (await repository.listClocks(tx, [row.id])).find((one) => one.id === clockId);
  if (!clock) throw new Problem('not-found', 'There is no such step.');
  if (clock.doneAt) throw new Problem('already-done', `"${clock.step}" was recorded already.`);
  await repository.finishClock(tx, clockId, {
    doneAt: deps.now().toISOString(),
    doneById: context.personId,
    doneNote: input.note,
  });
  await recordChange(tx, context, {
    action: 'finish',
    subjectType: 'exceedances',
    subjectId: row.id,
    sentence: `${clock.step}: done.`,
    reason: input.note,
    after: { clockId },
  });
  return { id: clockId };
}

export async function addNote(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  exceedanceId: string,
  input: z.output<typeof exceedanceNoteInput>,
) {
  const row = await openExceedance(tx, context, exceedanceId);
  await repository.insertNote(tx, {
    organisationId: context.organisationId,
    id: input.id,
    exceedanceId: row.id,
    note: input.note,
    writtenById: context.personId,
    writtenAt: deps.now().toISOString(),
  });
  await recordChange(tx, context, {
    action: 'note',
    subjectType: 'exceedances',
    subjectId: row.id,
    sentence: 'A note was added to the exceedance.',
    reason: input.note,
  });
  return { id: input.id };
}

export async function closeExceedance(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  exceedanceId: string,
  input: z.output<typeof exceedanceCloseInput>,
) {
  const row = await openExceedance(tx, context, exceedanceId);
  if (row.closedAt) throw new Problem('already-done', 'This exceedance was closed already.');
  const open = (await repository.listClocks(tx, [row.id])).filter((clock) => !clock.doneAt);
  if (open.length)
    throw new Problem(
      'not-ready',
      `Record these steps first: ${open.map((clock) => clock.step).join(', ')}.`,
    );
  await repository.closeExceedance(tx, row.id, {
    closedAt: deps.now().toISOString(),
    closedById: context.personId,
    cause: input.cause,
  });
  await recordChange(tx, context, {
    action: 'close',
    subjectType: 'exceedances',
    subjectId: row.id,
    sentence: `Closed: ${row.sentence}`,
    reason: input.cause,
  });
  return { id: row.id };
}
