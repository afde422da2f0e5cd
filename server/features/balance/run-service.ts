import type * as z from 'zod';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { freezeInput, parameterSetInput } from '#shared/schemas/balance.ts';
import {
  completeParameters,
  engineVersion,
  parameterTemplate,
  type BalanceParameters,
  type EngineInput,
} from '#shared/water-balance/engine-input.ts';
import { runWaterBalance, type StepResult } from '#shared/water-balance/run-water-balance.ts';
import { readStoredInput } from '#shared/water-balance/stored-input.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sha256Of } from '../../files/file-store.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';
import * as repository from './balance-repository.ts';
import { buildEngineInput } from './engine-input-service.ts';

/** JSON with sorted keys, so that the same input has the same bytes. */
export function canonicalJson(value: unknown): string {
  return JSON.stringify(value, (_key, inner: unknown) =>
    inner !== null && typeof inner === 'object' && !Array.isArray(inner)
      ? Object.fromEntries(Object.entries(inner).sort(([a], [b]) => (a < b ? -1 : 1)))
      : inner,
  );
}

/** The site's current parameter set; the template is stored on first use, unconfirmed. */
export async function currentParameters(tx: Transaction, context: Context, deps: Dependencies) {
  const siteId = siteOf(context);
  const known = await repository.findCurrentParameterSet(tx, siteId);
  if (known) return known;
  await repository.lockWorkingRun(tx, siteId);
  const meanwhile = await repository.findCurrentParameterSet(tx, siteId);
  if (meanwhile) return meanwhile;
  await repository.insertParameterSet(tx, {
    organisationId: context.organisationId,
    id: deps.newId(),
    siteId,
    name: 'Template',
    version: 1,
    values: parameterTemplate,
    createdById: context.personId,
    isCurrent: true,
  });
  return (await repository.findCurrentParameterSet(tx, siteId))!;
}

const stepRows = (context: Context, deps: Dependencies, runId: string, steps: readonly StepResult[]) =>
  steps.map((step) => ({
    organisationId: context.organisationId,
    id: deps.newId(),
    runId,
    cellId: step.cellId,
    plotId: step.plotId,
    coverTypeId: step.coverTypeId,
    month: step.month,
    fromOn: step.fromOn,
    dayCount: step.dayCount,
    areaM2: step.areaM2,
    terms: step.terms,
  }));

function computeRun(input: EngineInput) {
  try {
    return { ...runWaterBalance(input), problem: null };
  } catch (error) {
    return {
      steps: [],
      warnings: [],
      problem: error instanceof Error ? error.message : 'The balance could not be computed.',
    };
  }
}

export interface WorkingRun {
  run: NonNullable<Awaited<ReturnType<typeof repository.findWorkingRun>>>;
  stopped: string | null;
  climate: Awaited<ReturnType<typeof buildEngineInput>>['climate'];
  input: EngineInput;
}

/** The working run, computed again whenever any of its inputs has changed since. */
export async function workingRun(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  record: SiteRecord,
): Promise<WorkingRun> {
  const siteId = siteOf(context);
  const parameters = await currentParameters(tx, context, deps);
  const today = (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
  const { input, climate, stopped } = await buildEngineInput(
    tx,
    record,
    completeParameters(parameters.values as Partial<BalanceParameters>),
    today,
  );
  const inputSha256 = sha256Of(engineVersion + canonicalJson(input));
  const isCurrent = (run: Awaited<ReturnType<typeof repository.findWorkingRun>>) =>
    run?.inputSha256 === inputSha256 && run.parameterSetId === parameters.id;
  const known = await repository.findWorkingRun(tx, siteId);
  if (known && isCurrent(known)) return { run: known, stopped, climate, input };
  // Two pages opened at once: the second waits and finds the first one's run.
  await repository.lockWorkingRun(tx, siteId);
  const meanwhile = await repository.findWorkingRun(tx, siteId);
  if (meanwhile && isCurrent(meanwhile)) return { run: meanwhile, stopped, climate, input };
  const { steps, warnings, problem } = computeRun(input);
  await repository.deleteWorkingRun(tx, siteId);
  const id = deps.newId();
  await repository.insertRun(tx, {
    organisationId: context.organisationId,
    id,
    siteId,
    kind: 'working',
    parameterSetId: parameters.id,
    engineVersion,
    inputSha256,
    warnings,
    problem,
    computedAt: deps.now().toISOString(),
  });
  await repository.insertSteps(tx, stepRows(context, deps, id, steps));
  return { run: (await repository.findWorkingRun(tx, siteId))!, stopped, climate, input };
}

/** Keeps the working run for ever: complete input, its hash, engine version, parameter set and results. */
export async function freezeRun(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof freezeInput>,
) {
  const siteId = siteOf(context);
  const { run, input: engineInput } = await workingRun(tx, context, deps, await readSite(tx, siteId));
  if (run.problem)
    throw new Problem('balance-refused', `The working run has no result to keep. ${run.problem}`);
  const number = ((await repository.listFrozenRuns(tx, siteId))[0]?.number ?? 0) + 1;
  await repository.insertRun(tx, {
    organisationId: context.organisationId,
    id: input.id,
    siteId,
    kind: 'frozen',
    number,
    parameterSetId: run.parameterSetId,
    engineVersion: run.engineVersion,
    inputSha256: run.inputSha256,
    input: canonicalJson(engineInput),
    warnings: run.warnings as string[],
    computedAt: deps.now().toISOString(),
    frozenById: context.personId,
    note: input.note ?? null,
  });
  const steps = await repository.listSteps(tx, run.id);
  await repository.insertSteps(
    tx,
    steps.map((step) => ({ ...step, id: deps.newId(), runId: input.id })),
  );
  await recordChange(tx, context, {
    action: 'freeze',
    subjectType: 'balance-runs',
    subjectId: input.id,
    sentence: `Run ${number} was frozen.`,
    reason: input.note,
    after: { number, inputSha256: run.inputSha256 },
  });
  return { id: input.id, number };
}

/** An accepted frozen run is the one that Compare and Report use. */
export async function acceptRun(tx: Transaction, context: Context, deps: Dependencies, runId: string) {
  const run = await repository.findRun(tx, siteOf(context), runId);
  if (!run || run.kind !== 'frozen')
    throw new Problem('not-found', 'There is no such frozen run at this site.');
  if (run.acceptedAt) throw new Problem('already-done', `Run ${run.number} was accepted already.`);
  await repository.acceptRun(tx, runId, context.personId, deps.now().toISOString());
  await recordChange(tx, context, {
    action: 'accept',
    subjectType: 'balance-runs',
    subjectId: runId,
    sentence: `Run ${run.number} was accepted for Compare and Report.`,
    after: { number: run.number },
  });
  return { id: runId };
}

/**
 * The run that predictions are taken from: the newest accepted one, else the working run.
 * @returns `isOutOfDate` when the record has changed since the accepted run was frozen; `readInput` its complete input
 */
export async function predictionRun(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  record: SiteRecord,
) {
  const accepted = (await repository.listFrozenRuns(tx, siteOf(context))).find(
    (run) => run.acceptedAt !== null,
  );
  const { run: working, input } = await workingRun(tx, context, deps, record);
  if (!accepted)
    return { run: working, isAccepted: false, isOutOfDate: false, readInput: () => Promise.resolve(input) };
  return {
    run: accepted,
    isAccepted: true,
    isOutOfDate: accepted.inputSha256 !== working.inputSha256,
    readInput: async () =>
      readStoredInput((await repository.findRun(tx, siteOf(context), accepted.id))!.input!),
  };
}

/** Recomputes a frozen run from its stored input and says whether the results agree to 1e-9. */
export async function recheckRun(tx: Transaction, context: Context, runId: string) {
  const run = await repository.findRun(tx, siteOf(context), runId);
  if (!run?.input) throw new Problem('not-found', 'There is no such frozen run at this site.');
  const steps = await repository.listSteps(tx, runId);
  const again = runWaterBalance(readStoredInput(run.input)).steps;
  const byKey = new Map(again.map((step) => [`${step.plotId} ${step.fromOn}`, step]));
  let worst = steps.length === again.length ? 0 : Infinity;
  for (const step of steps) {
    const stored = (step.terms as StepResult['terms']).leachateMm;
    const now = byKey.get(`${step.plotId} ${step.fromOn}`)?.terms.leachateMm ?? NaN;
    const difference = Math.abs(now - stored) / Math.max(1, Math.abs(stored));
    if (!(difference <= worst)) worst = difference;
  }
  return {
    number: run.number,
    stepCount: steps.length,
    largestRelativeDifference: worst,
    agrees: worst <= 1e-9,
    engineThen: run.engineVersion,
    engineNow: engineVersion,
  };
}

/** Why the balance cannot be computed with these parameters; null when it can, or when there is nothing to compute yet. */
async function problemWith(
  tx: Transaction,
  deps: Dependencies,
  record: SiteRecord,
  values: BalanceParameters,
): Promise<string | null> {
  const today = (await siteDaysOf(tx, record.site.id)).dayOf(deps.now().getTime());
  try {
    return computeRun((await buildEngineInput(tx, record, values, today)).input).problem;
  } catch (error) {
    if (error instanceof Problem) return null;
    throw error;
  }
}

/**
 * Stores a new parameter set and makes it current; the working run follows.
 * @throws Problem when the record lacks what the set needs and did not lack it before
 */
export async function createParameterSet(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof parameterSetInput>,
) {
  const siteId = siteOf(context);
  const before = await currentParameters(tx, context, deps);
  const record = await readSite(tx, siteId);
  const problem = await problemWith(tx, deps, record, input.values);
  if (
    problem &&
    !(await problemWith(tx, deps, record, completeParameters(before.values as Partial<BalanceParameters>)))
  )
    throw fieldProblem('/values/petMethod', `The balance could not be computed with this set: ${problem}`);
  const version =
    Math.max(
      0,
      ...(await repository.listParameterSets(tx, siteId))
        .filter((one) => one.name === input.name)
        .map((one) => one.version),
    ) + 1;
  await repository.insertParameterSet(tx, {
    organisationId: context.organisationId,
    id: input.id,
    siteId,
    name: input.name,
    version,
    values: input.values,
    createdById: context.personId,
    confirmedById: context.personId,
    confirmedAt: deps.now().toISOString(),
  });
  await repository.makeCurrent(tx, siteId, input.id);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'parameter-sets',
    subjectId: input.id,
    sentence: `Parameter set ${input.name}, version ${version}, is the current one.`,
    before: before.values,
    after: input.values,
  });
  return { id: input.id, version };
}

/** The set in force and every earlier one, newest first. */
export async function readParameterSets(tx: Transaction, context: Context, deps: Dependencies) {
  const complete = <T extends { values: unknown }>(set: T) => ({
    ...set,
    values: completeParameters(set.values as Partial<BalanceParameters>),
  });
  return {
    current: complete(await currentParameters(tx, context, deps)),
    sets: (await repository.listParameterSets(tx, siteOf(context))).map(complete),
  };
}
