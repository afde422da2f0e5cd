import { firstDay, lastDay } from '#shared/calendar/day.ts';
import { addMonths, type Month } from '#shared/calendar/month.ts';
import type * as z from 'zod';
import type { laboratoryInput, samplePointInput } from '#shared/schemas/lab.ts';
import type { LabView } from '#shared/views/lab-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context } from '../../http/route.ts';
import * as importRepository from '../imports/import-repository.ts';
import { listNames } from '../people/people-repository.ts';
import { siteOf } from '../sites/site-service.ts';
import * as repository from './lab-repository.ts';

/** Uploads, results of the last twelve months, and what the plan still waits for. */
export async function readLab(tx: Transaction, context: Context, month: Month): Promise<LabView> {
  const siteId = siteOf(context);
  const names = await listNames(tx);
  const points = await repository.listSamplePoints(tx, siteId);
  const analytes = await repository.listAnalytes(tx);
  const uploads = await importRepository.listImports(tx, siteId, 'lab', context.laboratoryId);
  const since = firstDay(addMonths(month, -11));
  const live = (await repository.listLiveResults(tx, siteId, since, lastDay(month))).filter(
    (row) => !context.laboratoryId || row.laboratoryId === context.laboratoryId,
  );
  const pointIds = new Set(points.map((point) => point.id));
  const plan = (await repository.listPlan(tx)).filter(
    (item) =>
      pointIds.has(item.samplePointId) &&
      item.fromOn <= lastDay(month) &&
      (item.toOn === null || item.toOn > firstDay(month)),
  );
  const code = (id: string) => points.find((point) => point.id === id)?.code ?? '';
  const name = (id: string) => analytes.find((analyte) => analyte.id === id)?.name ?? '';
  return {
    laboratories: (await repository.listLaboratories(tx)).filter(
      (one) => !context.laboratoryId || one.id === context.laboratoryId,
    ),
    points,
    analytes,
    uploads: uploads.map((row) => ({
      id: row.id,
      fileName: row.fileName,
      uploadedAt: row.uploadedAt,
      by: names.get(row.uploadedById) ?? '',
      counts: row.counts as { read: number; ok: number; warned: number; held: number; skipped: number },
      confirmedAt: row.confirmedAt,
      undoneAt: row.undoneAt,
      jobNumber: row.jobNumber,
    })),
    results: live.map((row) => ({
      id: row.id,
      siteDay: row.siteDay,
      pointCode: code(row.samplePointId),
      analyteName: name(row.analyteId),
      analyteId: row.analyteId,
      samplePointId: row.samplePointId,
      fraction: row.fraction,
      comparator: row.comparator,
      value: row.value,
      unit: row.unit,
      reportingLimit: row.reportingLimit,
      qualifier: row.qualifier,
      missingReason: row.missingReason,
      printedDecimals: row.printedDecimals,
      rawText: row.rawText,
      rawUnit: row.rawUnit,
      sheet: row.sheet,
      cell: row.cell,
      importId: row.importId,
      isRevision: row.supersedesId !== null,
    })),
    plan: plan.map((item) => {
      const got = live.filter(
        (row) =>
          row.samplePointId === item.samplePointId &&
          row.analyteId === item.analyteId &&
          row.fraction === item.fraction &&
          row.siteDay >= firstDay(month) &&
          row.siteDay <= lastDay(month) &&
          row.missingReason === null,
      ).length;
      return {
        id: item.id,
        pointCode: code(item.samplePointId),
        analyteName: name(item.analyteId),
        fraction: item.fraction,
        expectedCount: item.samplesPerMonth,
        receivedCount: got,
        turnaroundDays: item.turnaroundDays,
      };
    }),
  };
}

export async function createSamplePoint(
  tx: Transaction,
  context: Context,
  input: z.output<typeof samplePointInput>,
) {
  await repository.insertSamplePoint(tx, {
    organisationId: context.organisationId,
    siteId: siteOf(context),
    ...input,
    placeId: input.placeId ?? null,
  });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'sample-points',
    subjectId: input.id,
    sentence: `Sample point ${input.code} was added.`,
    after: input,
  });
  return { id: input.id };
}

export async function createLaboratory(
  tx: Transaction,
  context: Context,
  input: z.output<typeof laboratoryInput>,
) {
  await repository.insertLaboratory(tx, { organisationId: context.organisationId, ...input });
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'laboratories',
    subjectId: input.id,
    sentence: `Laboratory ${input.name} was added.`,
    after: input,
  });
  return { id: input.id };
}
