import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type {
  coverChangeInput,
  coverCorrectionInput,
  coverTypeChangeInput,
  coverTypeInput,
} from '#shared/schemas/sites.ts';
import { splitPlot } from '#shared/site/split-plot.ts';
import { withdrawCover } from '#shared/site/withdraw-cover.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as repository from './site-repository.ts';
import { readSite, siteDaysOf, siteOf } from './site-service.ts';

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
  await repository.updateCoverPeriods(tx, [current.id], { toOn: input.onDay });
  const cover = { organisationId, fromOn: input.onDay, evidence: input.evidence };
  const initialSoilStoreMm = input.initialSoilStoreMm ?? null;
  if (split.restAreaM2 === null) {
    await repository.insertCoverPeriods(tx, [
      { ...cover, id: deps.newId(), plotId: plot.id, coverTypeId: coverType.id, initialSoilStoreMm },
    ]);
  } else {
    await repository.updatePlots(tx, [plot.id], { toOn: input.onDay });
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

/** Puts right a cover entry made in error: another cover, or none. The entry stays, withdrawn, and the trail says why. */
export async function correctCover(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof coverCorrectionInput>,
) {
  const record = await readSite(tx, siteOf(context));
  const period = record.coverPeriods.find((one) => one.id === input.coverPeriodId);
  if (!period) throw new Problem('not-found', 'There is no such cover entry at this site.');
  const plot = record.plots.find((one) => one.id === period.plotId)!;
  const nameOf = (coverTypeId: string) =>
    record.coverTypes.find((type) => type.id === coverTypeId)?.name ?? '';
  const withdrawnAt = deps.now().toISOString();
  const change = {
    action: 'correct',
    subjectType: 'cover-periods',
    subjectId: period.id,
    reason: input.reason,
    before: period,
    after: input,
  };
  const entry = `${nameOf(period.coverTypeId)} on plot ${plot.name} from ${dayName(period.fromOn)}`;
  if (input.coverTypeId === 'none') {
    const found = withdrawCover(record.plots, record.coverPeriods, period.id);
    if ('refused' in found) throw fieldProblem('/coverTypeId', found.refused);
    await repository.updateCoverPeriods(tx, found.withdrawnPeriodIds, { withdrawnAt });
    await repository.updatePlots(tx, found.withdrawnPlotIds, { withdrawnAt });
    await repository.updatePlots(tx, found.resumedPlotIds, { toOn: null });
    await repository.updateCoverPeriods(tx, found.resumedPeriodIds, { toOn: null });
    await recordChange(tx, context, { ...change, sentence: `The entry ${entry} was taken out.` });
    return { id: period.id };
  }
  const type = record.coverTypes.find((one) => one.id === input.coverTypeId);
  if (!type) throw fieldProblem('/coverTypeId', 'Choose a cover of this site.');
  const neighbours = record.coverPeriods.filter(
    (one) => one.plotId === plot.id && (one.toOn === period.fromOn || one.fromOn === period.toOn),
  );
  if ([period, ...neighbours].some((one) => one.coverTypeId === type.id)) {
    throw fieldProblem(
      '/coverTypeId',
      `Plot ${plot.name} has ${type.name} then, or right before or after. Choose another cover.`,
    );
  }
  if (
    period.initialSoilStoreMm !== null &&
    Number(period.initialSoilStoreMm) > Number(type.availableWaterMm)
  ) {
    throw fieldProblem(
      '/coverTypeId',
      `The entry brought ${period.initialSoilStoreMm} mm of water with the soil and ${type.name} holds at most ${type.availableWaterMm} mm. Take the entry out and record it anew.`,
    );
  }
  await repository.updateCoverPeriods(tx, [period.id], { withdrawnAt });
  await repository.insertCoverPeriods(tx, [
    { ...period, id: deps.newId(), coverTypeId: type.id, withdrawnAt: null },
  ]);
  await recordChange(tx, context, { ...change, sentence: `The entry ${entry} became ${type.name}.` });
  return { id: period.id };
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
      curveNumber: input.curveNumber ?? null,
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
  await repository.updateCoverType(tx, coverTypeId, {
    confirmedById: context.personId,
    confirmedAt: deps.now().toISOString(),
  });
  await recordChange(tx, context, {
    action: 'confirm',
    subjectType: 'cover-types',
    subjectId: coverTypeId,
    sentence: `The values of ${type.name} were confirmed.`,
    after: type,
  });
  return { id: coverTypeId };
}

/**
 * Gives a cover other values. They hold for all its periods: the working run follows, frozen runs keep theirs. An
 * engineer who enters values confirms them.
 */
export async function changeCoverType(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  coverTypeId: string,
  { reason, ...values }: z.output<typeof coverTypeChangeInput>,
) {
  const record = await readSite(tx, siteOf(context));
  const before = record.coverTypes.find((one) => one.id === coverTypeId);
  if (!before) throw new Problem('not-found', 'There is no such cover at this site.');
  if (record.coverTypes.some((one) => one.id !== coverTypeId && one.name === values.name))
    throw fieldProblem('/name', `There is already a cover ${values.name}. Choose another name.`);
  const capacityMm = Number(values.availableWaterMm);
  const wet = record.coverPeriods.find(
    (period) => period.coverTypeId === coverTypeId && Number(period.initialSoilStoreMm ?? 0) > capacityMm,
  );
  if (wet)
    throw fieldProblem(
      '/availableWaterMm',
      `On ${dayName(wet.fromOn)} soil of this cover was placed with ${wet.initialSoilStoreMm} mm of water, more than ${capacityMm} mm. Correct that entry first.`,
    );
  await repository.updateCoverType(tx, coverTypeId, {
    ...values,
    hasSoilStore: capacityMm > 0,
    membranePassFraction: values.membranePassFraction ?? null,
    curveNumber: values.curveNumber ?? null,
    confirmedById: context.personId,
    confirmedAt: deps.now().toISOString(),
  });
  await recordChange(tx, context, {
    action: 'change',
    subjectType: 'cover-types',
    subjectId: coverTypeId,
    sentence: `The values of ${before.name} were changed.`,
    reason,
    before,
    after: values,
  });
  return { id: coverTypeId };
}
