import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import { Problem, fieldProblem, type FieldProblem } from '#shared/problems.ts';
import type { cellInput, cellNameInput, wasteInput } from '#shared/schemas/sites.ts';
import { checkPlotAreas } from '#shared/site/check-plot-areas.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as repository from './site-repository.ts';
import { readSite, siteDaysOf, siteOf } from './site-service.ts';

/** Makes a cell with its first lined area and its plots, which must add to it. */
export async function createCell(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof cellInput>,
) {
  const siteId = siteOf(context);
  const { organisationId } = context;
  const record = await readSite(tx, siteId);
  const errors: FieldProblem[] = [];
  const areas = checkPlotAreas(
    input.plots.map((plot) => plot.areaM2),
    input.linedAreaM2,
  );
  if (areas.kind === 'refuse' || (areas.kind === 'ask' && !input.areaReason))
    errors.push({ pointer: areas.kind === 'ask' ? '/areaReason' : '/plots', detail: areas.sentence });
  if (input.openedOn < record.site.openedOn)
    errors.push({
      pointer: '/openedOn',
      detail: `The record of the site begins on ${dayName(record.site.openedOn)}; the cell cannot have opened before it. Change the first day under Settings.`,
    });
  if (record.cells.some((cell) => cell.code === input.code))
    errors.push({ pointer: '/code', detail: `There is already a cell ${input.code}. Choose another code.` });
  input.plots.forEach((plot, index) => {
    if (!record.coverTypes.some((type) => type.id === plot.coverTypeId))
      errors.push({ pointer: `/plots/${index}/coverTypeId`, detail: 'Choose a cover of this site.' });
  });
  if (errors.length) throw new Problem('fields-need-another-look', errors[0]!.detail, errors);
  await repository.insertCell(tx, {
    organisationId,
    id: input.id,
    siteId,
    code: input.code,
    name: input.name,
    openedOn: input.openedOn,
  });
  await repository.insertCellArea(tx, {
    organisationId,
    id: deps.newId(),
    cellId: input.id,
    validFromOn: input.openedOn,
    linedAreaM2: input.linedAreaM2,
    evidence: input.evidence,
  });
  await repository.insertPlots(
    tx,
    input.plots.map((plot) => ({
      organisationId,
      id: plot.id,
      cellId: input.id,
      name: plot.name,
      areaM2: plot.areaM2,
      fromOn: input.openedOn,
    })),
  );
  await repository.insertCoverPeriods(
    tx,
    input.plots.map((plot) => ({
      organisationId,
      id: deps.newId(),
      plotId: plot.id,
      coverTypeId: plot.coverTypeId,
      fromOn: input.openedOn,
      evidence: input.evidence,
    })),
  );
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'cells',
    subjectId: input.id,
    sentence: `Cell ${input.code} ${input.name} was made with ${input.plots.length} plots.`,
    reason: input.areaReason,
    after: input,
  });
  return { id: input.id };
}

/** A cell under another code or name; everything recorded for it stays with it. */
export async function renameCell(
  tx: Transaction,
  context: Context,
  { cellId, code, name }: z.output<typeof cellNameInput>,
) {
  const record = await readSite(tx, siteOf(context));
  const cell = record.cells.find((one) => one.id === cellId);
  if (!cell) throw new Problem('not-found', 'There is no such cell at this site.');
  if (record.cells.some((one) => one.id !== cellId && one.code === code))
    throw fieldProblem('/code', `There is already a cell ${code}. Choose another code.`);
  await repository.updateCell(tx, cellId, { code, name });
  await recordChange(tx, context, {
    action: 'change',
    subjectType: 'cells',
    subjectId: cellId,
    sentence: `Cell ${cell.code} ${cell.name} is called ${code} ${name} now.`,
    before: cell,
    after: { code, name },
  });
  return { id: cellId };
}

export async function addWaste(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof wasteInput>,
) {
  const record = await readSite(tx, siteOf(context));
  const today = (await siteDaysOf(tx, record.site.id)).dayOf(deps.now().getTime());
  if (input.month > today.slice(0, 7))
    throw fieldProblem(
      '/month',
      `${monthName(input.month)} is still to come. Enter the waste once it is placed.`,
    );
  const cell = record.cells.find((one) => one.id === input.cellId);
  if (!cell) throw fieldProblem('/cellId', 'Choose a cell of this site.');
  if (record.wastePlaced.some((row) => row.cellId === cell.id && row.month === input.month)) {
    throw fieldProblem('/month', `${cell.code} already has waste recorded for ${monthName(input.month)}.`);
  }
  await repository.insertWaste(tx, { organisationId: context.organisationId, ...input });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'waste-placed',
    subjectId: input.id,
    sentence: `${input.massT} t of waste were placed in ${cell.code} in ${monthName(input.month)}.`,
    after: input,
  });
  return { id: input.id };
}
