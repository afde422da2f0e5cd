import { Decimal } from 'decimal.js';
import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { alignEstimate } from '#shared/ledger/align-estimate.ts';
import { checkReading, type ReadingCheck } from '#shared/ledger/check-reading.ts';
import { parseNumber } from '#shared/ledger/parse-number.ts';
import type { RegisterSpec } from '#shared/ledger/register.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { estimateInput, readingInput, settleInput, voidInput } from '#shared/schemas/readings.ts';
import { estimateMethods } from '#shared/schemas/readings.ts';
import type { VolumeUnit } from '#shared/units/unit-factors.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { recomputeDays, repostMeter, waitsWarning } from '../ledger/posting-service.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';
import { resolveObservedAt } from './observed-time.ts';
import * as repository from './reading-repository.ts';

/** The register of a meter as it was at an instant, after the events before it. */
export function registerAt(record: SiteRecord, meterId: string, atMs: number): RegisterSpec {
  const meter = record.meters.find((one) => one.id === meterId)!;
  const first: RegisterSpec = {
    digits: meter.digits,
    decimals: meter.decimals,
    unit: meter.unit as VolumeUnit,
    multiplier: meter.multiplier,
  };
  return record.meterEvents
    .filter(
      (event) => event.meterId === meterId && event.isVoid === 'no' && Date.parse(event.observedAt) <= atMs,
    )
    .reduce(
      (spec, event) => ({
        ...spec,
        digits: event.digitsAfter ?? spec.digits,
        unit: (event.unitAfter as VolumeUnit | null) ?? spec.unit,
        multiplier: event.multiplierAfter ?? spec.multiplier,
      }),
      first,
    );
}

function registerValueOf(text: string, spec: RegisterSpec, label: string): string {
  const parsed = parseNumber(text, { decimals: spec.decimals });
  if (parsed.kind === 'wrong') throw fieldProblem('/registerText', `${label}: ${parsed.reason}`);
  if (parsed.kind === 'ask')
    throw fieldProblem(
      '/registerText',
      `${label}: ${parsed.question} Enter it without a comma or point between thousands.`,
    );
  const [whole = '', part = ''] = parsed.value.split('.');
  if (parsed.value.startsWith('-'))
    throw fieldProblem('/registerText', `${label}: a register never shows less than 0.`);
  if (whole.length > spec.digits - spec.decimals)
    throw fieldProblem(
      '/registerText',
      `${label}: the register shows ${spec.digits} digits, this has ${whole.length + part.length}. Look for a digit too many.`,
    );
  if (part.length > spec.decimals)
    throw fieldProblem(
      '/registerText',
      `${label}: the register shows ${spec.decimals === 0 ? 'no decimals' : `${spec.decimals} decimals`}.`,
    );
  return parsed.value;
}

/** The reading before, on the register as it is now: a replacement in between starts from what the new register showed. */
export async function lastOnSameRegister(
  tx: Transaction,
  record: SiteRecord,
  meterId: string,
  at: string,
  exceptId?: string,
) {
  const last = await repository.lastReadingBefore(tx, meterId, at, exceptId);
  const event = record.meterEvents
    .filter(
      (one) =>
        one.meterId === meterId &&
        one.isVoid === 'no' &&
        one.registerAfter !== null &&
        one.observedAt <= at &&
        (!last || one.observedAt > last.observedAt),
    )
    .at(-1);
  if (event) return { registerValue: event.registerAfter!, observedAtMs: Date.parse(event.observedAt) };
  return last && { registerValue: last.registerValue, observedAtMs: Date.parse(last.observedAt) };
}

const isQuestion = (check: ReadingCheck) =>
  check.kind === 'rollover' || check.kind === 'went-down' || check.kind === 'too-fast';

/** Whether what the reader said settles the question that the value raises. */
function isAnswered(check: ReadingCheck, answer: string): boolean {
  if (check.kind === 'rollover') return answer === 'rollover';
  if (check.kind === 'too-fast') return answer === 'confirmed';
  return !isQuestion(check);
}

/**
 * Stores a reading as it was seen. An unlikely one without an answer is stored and held out of the totals; it blocks nothing.
 * @returns the check, so that the page can ask
 */
export async function createReading(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof readingInput>,
) {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const meter = record.meters.find((one) => one.id === input.meterId);
  if (!meter) throw fieldProblem('/meterId', 'Choose a meter of this site.');
  const known = await repository.findReading(tx, input.id);
  if (known)
    throw new Problem(
      'id-used-for-other-content',
      'A reading with this id is already stored with other content. Both are kept on this page; nothing was overwritten.',
    );
  const observed = await resolveObservedAt(tx, siteId, deps.now(), input);
  if (observed.siteDay < meter.installedOn)
    throw fieldProblem(
      '/observedLocal',
      `Meter ${meter.code} was installed on ${dayName(meter.installedOn)}. A reading cannot be older.`,
    );
  const spec = registerAt(record, meter.id, observed.observedAtMs);
  const registerValue = registerValueOf(input.registerText, spec, meter.name);
  if (input.supersedesId) {
    const replaced = await repository.findReading(tx, input.supersedesId);
    if (!replaced || replaced.meterId !== meter.id)
      throw fieldProblem('/supersedesId', 'The reading to replace does not belong to this meter.');
    if (!input.reason) throw fieldProblem('/reason', 'Say why the reading is replaced.');
  }
  const last = await lastOnSameRegister(tx, record, meter.id, observed.observedAt, input.supersedesId);
  const check = checkReading({
    spec,
    rateM3PerDayMax: Number(meter.rateM3PerDayMax),
    last,
    next: { registerValue, observedAtMs: observed.observedAtMs },
    usualM3PerDay: null,
  });
  const answer = isAnswered(check, input.answer) ? input.answer : 'held';
  await repository.insertReading(tx, {
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    meterId: meter.id,
    observedAt: observed.observedAt,
    observedOffsetMinutes: observed.observedOffsetMinutes,
    siteDay: observed.siteDay,
    typedText: input.registerText,
    registerValue,
    answer,
    note: input.note ?? null,
    supersedesId: input.supersedesId ?? null,
    reason: input.reason ?? null,
    deviceId: input.deviceId ?? null,
    recordedAt: deps.now().toISOString(),
  });
  await recordChange(tx, context, {
    action: input.supersedesId ? 'replace' : 'create',
    subjectType: 'readings',
    subjectId: input.id,
    sentence: `Meter ${meter.code} was read: ${input.registerText}${answer === 'held' ? ', held until answered' : ''}.`,
    reason: input.reason ?? input.note,
    after: { ...input, siteDay: observed.siteDay },
  });
  const waiting = await repostMeter(tx, context, deps, record, meter.id, {
    atMs: observed.observedAtMs,
    factId: input.id,
    why: `Reading ${new Decimal(registerValue).toFixed()} of ${dayName(observed.siteDay)}`,
  });
  return {
    id: input.id,
    state: answer === 'held' ? ('held' as const) : ('stored' as const),
    siteDay: observed.siteDay,
    observedAt: observed.observedAt,
    check,
    warning: waitsWarning(waiting),
  };
}

/** Voids a reading: the row stays, a void row says why. */
export async function voidReading(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  readingId: string,
  input: z.output<typeof voidInput>,
) {
  const reading = await repository.findReading(tx, readingId);
  const record = await readSite(tx, siteOf(context));
  const meter = record.meters.find((one) => one.id === reading?.meterId);
  if (!reading || !meter) throw new Problem('not-found', 'There is no such reading at this site.');
  const { sequence: _sequence, recordedAt: _recordedAt, ...copy } = reading;
  await repository.insertReading(tx, {
    ...copy,
    id: input.id,
    recordedById: context.personId,
    supersedesId: reading.id,
    isVoid: 'yes',
    reason: input.reason,
  });
  await recordChange(tx, context, {
    action: 'void',
    subjectType: 'readings',
    subjectId: reading.id,
    sentence: `Reading ${reading.typedText} of meter ${meter.code} on ${dayName(reading.siteDay)} was voided.`,
    reason: input.reason,
    before: reading,
  });
  await repostMeter(tx, context, deps, record, meter.id, {
    atMs: Date.parse(reading.observedAt),
    factId: input.id,
    why: `Reading of ${dayName(reading.siteDay)} voided`,
  });
  return { id: input.id };
}

const estimateSnapMs = 3 * 3_600_000;

/** The span of an estimate from reading to reading. */
async function wholeIntervals(
  tx: Transaction,
  record: SiteRecord,
  meter: SiteRecord['meters'][number],
  asked: { fromMs: number; toMs: number },
) {
  const days = await siteDaysOf(tx, record.site.id);
  const widened = [
    new Date(asked.fromMs - 40 * 86_400_000).toISOString(),
    new Date(asked.toMs + 40 * 86_400_000).toISOString(),
  ] as const;
  const { intervals } = await recomputeDays(tx, record, meter, days, ...widened);
  const span = alignEstimate(intervals, asked, estimateSnapMs);
  if (span.kind === 'aligned' && span.toMs > span.fromMs) return span;
  const local = (ms: number) => days.localTime(ms).replace('T', ' ');
  if (span.kind === 'aligned')
    throw fieldProblem(
      '/toAt',
      'Both ends of the span stand for the same reading. Choose a span from one reading to another.',
    );
  throw fieldProblem(
    span.end === 'from' ? '/fromAt' : '/toAt',
    `An estimate goes from reading to reading. Meter ${meter.code} was read at ${local(span.beforeMs)} and at ${local(span.afterMs)}: choose one of the two.`,
  );
}

/** Stores a supervisor's estimate for a span of a meter, with its inputs. */
export async function createEstimate(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof estimateInput>,
) {
  const record = await readSite(tx, siteOf(context));
  const meter = record.meters.find((one) => one.id === input.meterId);
  if (!meter) throw fieldProblem('/meterId', 'Choose a meter of this site.');
  const asked = { fromMs: Date.parse(input.fromAt), toMs: Date.parse(input.toAt) };
  if (asked.toMs <= asked.fromMs) throw fieldProblem('/toAt', 'The span must end after it starts.');
  if (asked.toMs > deps.now().getTime()) throw fieldProblem('/toAt', 'The span ends in time to come.');
  const { fromMs, toMs } = await wholeIntervals(tx, record, meter, asked);
  await repository.insertAdjustment(tx, {
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    meterId: meter.id,
    kind: 'estimate',
    fromAt: new Date(fromMs).toISOString(),
    toAt: new Date(toMs).toISOString(),
    volumeM3: input.volumeM3,
    method: input.method,
    inputs: { text: input.inputs },
    acceptedById: context.personId,
    reason: input.reason,
  });
  await recordChange(tx, context, {
    action: 'estimate',
    subjectType: 'adjustments',
    subjectId: input.id,
    sentence: `${input.volumeM3} m³ were estimated for meter ${meter.code}: ${estimateMethods[input.method]}.`,
    reason: input.reason,
    after: input,
  });
  await repostMeter(tx, context, deps, record, meter.id, {
    atMs: fromMs,
    toMs,
    factId: input.id,
    why: `Estimate: ${estimateMethods[input.method]}`,
  });
  return { id: input.id };
}

/** Chooses between two live readings of one instant. */
export async function settleDispute(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof settleInput>,
) {
  const reading = await repository.findReading(tx, input.chosenReadingId);
  const record = await readSite(tx, siteOf(context));
  const meter = record.meters.find((one) => one.id === reading?.meterId);
  if (!reading || !meter) throw fieldProblem('/chosenReadingId', 'Choose one of the two readings.');
  await repository.insertDispute(tx, {
    organisationId: context.organisationId,
    id: input.id,
    recordedById: context.personId,
    meterId: meter.id,
    observedAt: reading.observedAt,
    chosenReadingId: reading.id,
    reason: input.reason,
  });
  await recordChange(tx, context, {
    action: 'settle',
    subjectType: 'readings',
    subjectId: reading.id,
    sentence: `Reading ${reading.typedText} of meter ${meter.code} counts.`,
    reason: input.reason,
    after: input,
  });
  await repostMeter(tx, context, deps, record, meter.id, {
    atMs: Date.parse(reading.observedAt),
    factId: input.id,
    why: 'Dispute settled',
  });
  return { id: input.id };
}
