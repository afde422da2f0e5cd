import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import { Problem, fieldProblem, type FieldProblem } from '#shared/problems.ts';
import type { cellInput, coverChangeInput, coverTypeInput, wasteInput } from '#shared/schemas/sites.ts';
import { checkPlotAreas } from '#shared/site/check-plot-areas.ts';
import { splitPlot } from '#shared/site/split-plot.ts';
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
      detail: `The site opened on ${record.site.openedOn}; the cell cannot have opened before it.`,
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

/** Records that a plot, or part of it, was covered on a day. */
export async function changeCover(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof coverChangeInput>,
) {
  const { organisationId } = context;
  const record = await readSite(tx, siteOf(context));
  const plot = record.plots.find((one) => one.id === input.plotId);
  const coverType = record.coverTypes.find((one) => one.id === input.coverTypeId);
  if (!plot) throw fieldProblem('/plotId', 'Choose a plot of this site.');
  if (!coverType) throw fieldProblem('/coverTypeId', 'Choose a cover of this site.');
  const capacityMm = Number(coverType.availableWaterMm);
  if (input.initialSoilStoreMm !== undefined && Number(input.initialSoilStoreMm) > capacityMm)
    throw fieldProblem(
      '/initialSoilStoreMm',
      `${coverType.name} holds at most ${capacityMm} mm. Enter the water in the placed soil up to that.`,
    );
  if (input.onDay > (await siteDaysOf(tx, siteOf(context))).dayOf(deps.now().getTime()))
    throw fieldProblem('/onDay', 'This day is still to come. Record the cover when the ground is covered.');
  const split = splitPlot(plot, input);
  if ('refused' in split)
    throw fieldProblem(split.refused.includes('cannot be covered') ? '/areaM2' : '/onDay', split.refused);
  const periods = record.coverPeriods.filter((period) => period.plotId === plot.id);
  const current = periods.find(
    (period) => period.fromOn <= input.onDay && (period.toOn === null || period.toOn > input.onDay),
  );
  const later = periods.find((period) => period.fromOn >= input.onDay);
  if (later)
    throw fieldProblem(
      '/onDay',
      `Plot ${plot.name} already has a cover from ${dayName(later.fromOn)} to ${later.toOn ? dayName(later.toOn) : 'now'}. Two covers cannot lie on one plot at once; choose a later day.`,
    );
  if (!current)
    throw fieldProblem('/onDay', `Plot ${plot.name} has no cover on ${dayName(input.onDay)} to change from.`);
  if (current.coverTypeId === coverType.id)
    throw fieldProblem(
      '/coverTypeId',
      `Plot ${plot.name} has ${coverType.name} already. Choose another cover.`,
    );
  await repository.endCoverPeriod(tx, current.id, input.onDay);
  const cover = { organisationId, fromOn: input.onDay, evidence: input.evidence };
  const initialSoilStoreMm = input.initialSoilStoreMm ?? null;
  if (split.restAreaM2 === null) {
    await repository.insertCoverPeriods(tx, [
      { ...cover, id: deps.newId(), plotId: plot.id, coverTypeId: coverType.id, initialSoilStoreMm },
    ]);
  } else {
    await repository.endPlot(tx, plot.id, input.onDay);
    const child = { organisationId, cellId: plot.cellId, parentId: plot.id, fromOn: input.onDay };
    await repository.insertPlots(tx, [
      { ...child, id: input.newPlotId, name: input.newPlotName, areaM2: split.coveredAreaM2 },
      { ...child, id: input.restPlotId, name: plot.name, areaM2: split.restAreaM2 },
    ]);
    await repository.insertCoverPeriods(tx, [
      { ...cover, id: deps.newId(), plotId: input.newPlotId, coverTypeId: coverType.id, initialSoilStoreMm },
      { ...cover, id: deps.newId(), plotId: input.restPlotId, coverTypeId: current.coverTypeId },
    ]);
  }
  await recordChange(tx, context, {
    action: 'change',
    subjectType: 'plots',
    subjectId: plot.id,
    sentence: `${split.coveredAreaM2} m² of plot ${plot.name} became ${coverType.name} on ${dayName(input.onDay)}.`,
    reason: input.evidence,
    before: { plot, cover: current },
    after: input,
  });
  return { id: split.restAreaM2 === null ? plot.id : input.newPlotId };
}

export async function createCoverType(
  tx: Transaction,
  context: Context,
  input: z.output<typeof coverTypeInput>,
) {
  const siteId = siteOf(context);
  await repository.insertCoverTypes(tx, [
    {
      organisationId: context.organisationId,
      siteId,
      hasSoilStore: Number(input.availableWaterMm) > 0,
      ...input,
      membranePassFraction: input.membranePassFraction ?? null,
    },
  ]);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'cover-types',
    subjectId: input.id,
    sentence: `Cover ${input.name} was added.`,
    after: input,
  });
  return { id: input.id };
}

/** A template becomes the site's own value when an engineer confirms it. */
export async function confirmCoverType(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  coverTypeId: string,
) {
  const record = await readSite(tx, siteOf(context));
  const type = record.coverTypes.find((one) => one.id === coverTypeId);
  if (!type) throw new Problem('not-found', 'There is no such cover at this site.');
  if (type.confirmedAt) throw new Problem('already-done', `${type.name} was confirmed already.`);
  await repository.confirmCoverType(tx, coverTypeId, context.personId, deps.now().toISOString());
  await recordChange(tx, context, {
    action: 'confirm',
    subjectType: 'cover-types',
    subjectId: coverTypeId,
    sentence: `The values of ${type.name} were confirmed.`,
    after: type,
  });
  return { id: coverTypeId };
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
