import { Decimal } from 'decimal.js';
import type { Finding } from '../findings.ts';
import { registerModulus, registerVolumeM3, type RegisterSpec } from './register.ts';

export interface ReadingFact {
  id: string;
  observedAtMs: number;
  registerValue: string;
  answer: 'none' | 'rollover' | 'confirmed' | 'held';
}

export interface MeterEventFact {
  id: string;
  kind: string;
  observedAtMs: number;
  registerBefore: string | null;
  registerAfter: string | null;
  digitsAfter: number | null;
  unitAfter: RegisterSpec['unit'] | null;
  multiplierAfter: string | null;
}

export interface AdjustmentFact {
  id: string;
  kind: 'estimate' | 'calibration' | 'suspect';
  fromMs: number;
  toMs: number;
  volumeM3: string | null;
  /** What the raw volume is divided by: 1 + the as-found error. */
  divisor: string | null;
}

export interface MeterFacts {
  spec: RegisterSpec;
  readings: readonly ReadingFact[];
  events: readonly MeterEventFact[];
  adjustments: readonly AdjustmentFact[];
  /** Reading chosen for an instant with two live readings, by reading id. */
  chosenReadingIds: ReadonlySet<string>;
}

/** Water that passed a meter between two instants. Volume is null while a question about it is open. */
export interface Interval {
  fromMs: number;
  toMs: number;
  opening: string;
  closing: string;
  wrap: string;
  multiplier: string;
  unit: RegisterSpec['unit'];
  volumeM3: Decimal | null;
  basis: 'measured' | 'estimated';
  /** Why the volume is null. */
  heldBecause: 'register-went-down' | 'dispute' | null;
  factIds: string[];
}

interface Point {
  atMs: number;
  reading: ReadingFact;
  isDisputed: boolean;
}

/** One point per instant; two live readings of one instant are a dispute until one is chosen. */
function livePoints(facts: MeterFacts): Point[] {
  const byInstant = new Map<number, ReadingFact[]>();
  for (const reading of facts.readings) {
    if (reading.answer === 'held') continue;
    byInstant.set(reading.observedAtMs, [...(byInstant.get(reading.observedAtMs) ?? []), reading]);
  }
  return [...byInstant]
    .sort(([a], [b]) => a - b)
    .map(([atMs, readings]) => {
      const chosen = readings.find((reading) => facts.chosenReadingIds.has(reading.id));
      const isSame = readings.every((reading) =>
        new Decimal(reading.registerValue).eq(readings[0]!.registerValue),
      );
      return { atMs, reading: chosen ?? readings[0]!, isDisputed: !chosen && !isSame };
    });
}

/** The register as an event leaves it. */
const specAfter = (spec: RegisterSpec, event: MeterEventFact): RegisterSpec => ({
  digits: event.digitsAfter ?? spec.digits,
  decimals: spec.decimals,
  unit: event.unitAfter ?? spec.unit,
  multiplier: event.multiplierAfter ?? spec.multiplier,
});

/** One stretch of one register between two values. */
function stretch(
  spec: RegisterSpec,
  from: { atMs: number; value: string },
  to: { atMs: number; value: string },
  isRolled: boolean,
  factIds: string[],
  isDisputed: boolean,
): Interval {
  const isDown = new Decimal(to.value).lt(from.value);
  const wrap = isDown && isRolled ? registerModulus(spec) : new Decimal(0);
  const isHeld = isDisputed || (isDown && !isRolled);
  return {
    fromMs: from.atMs,
    toMs: to.atMs,
    opening: from.value,
    closing: to.value,
    wrap: wrap.toFixed(),
    multiplier: spec.multiplier,
    unit: spec.unit,
    basis: 'measured',
    factIds,
    volumeM3: isHeld ? null : registerVolumeM3(from.value, to.value, wrap, spec),
    heldBecause: isDisputed ? 'dispute' : isDown && !isRolled ? 'register-went-down' : null,
  };
}

/** Intervals between two points, split at every event that changed what the register shows. */
function intervalsBetween(
  before: Point,
  after: Point,
  specBefore: RegisterSpec,
  events: readonly MeterEventFact[],
): { intervals: Interval[]; spec: RegisterSpec } {
  const factIds = [before.reading.id, after.reading.id];
  const isDisputed = before.isDisputed || after.isDisputed;
  const intervals: Interval[] = [];
  let spec = specBefore;
  let from = { atMs: before.atMs, value: before.reading.registerValue };
  let isRolled = after.reading.answer === 'rollover';
  for (const event of events) {
    if (event.kind === 'rollover') isRolled = true;
    if (event.registerBefore !== null) {
      intervals.push(
        stretch(
          spec,
          from,
          { atMs: event.observedAtMs, value: event.registerBefore },
          false,
          [...factIds, event.id],
          isDisputed,
        ),
      );
    }
    spec = specAfter(spec, event);
    if (event.registerAfter !== null) from = { atMs: event.observedAtMs, value: event.registerAfter };
  }
  intervals.push(
    stretch(
      spec,
      from,
      { atMs: after.atMs, value: after.reading.registerValue },
      isRolled,
      [...factIds, ...events.map((event) => event.id)],
      isDisputed,
    ),
  );
  return { intervals, spec };
}

/** The parts of an interval outside a span, each with its share by time. */
function outside(interval: Interval, span: { fromMs: number; toMs: number }): Interval[] {
  if (interval.fromMs >= span.toMs || interval.toMs <= span.fromMs) return [interval];
  const parts = [
    { fromMs: interval.fromMs, toMs: span.fromMs },
    { fromMs: span.toMs, toMs: interval.toMs },
  ].filter((part) => part.toMs > part.fromMs);
  const lengthMs = interval.toMs - interval.fromMs;
  return parts.map((part) => ({
    ...interval,
    ...part,
    volumeM3: interval.volumeM3?.times(part.toMs - part.fromMs).div(lengthMs) ?? null,
  }));
}

/** An estimate takes the place of what lies inside its span; nothing is counted twice. */
function withEstimates(intervals: Interval[], adjustments: readonly AdjustmentFact[]): Interval[] {
  let result = intervals;
  for (const estimate of adjustments.filter((one) => one.kind === 'estimate' && one.volumeM3 !== null)) {
    const inside = result.filter((one) => one.fromMs >= estimate.fromMs && one.toMs <= estimate.toMs);
    const first = inside[0];
    const replaced: Interval = {
      fromMs: estimate.fromMs,
      toMs: estimate.toMs,
      opening: first?.opening ?? '',
      closing: inside.at(-1)?.closing ?? '',
      wrap: '0',
      multiplier: first?.multiplier ?? '1',
      unit: first?.unit ?? 'm3',
      volumeM3: new Decimal(estimate.volumeM3!),
      basis: 'estimated',
      heldBecause: null,
      factIds: [estimate.id, ...new Set(inside.flatMap((one) => one.factIds))],
    };
    result = [...result.flatMap((one) => outside(one, estimate)), replaced].sort(
      (a, b) => a.fromMs - b.fromMs,
    );
  }
  return result;
}

/** A calibration layer divides the part of an interval inside its span by 1 + the as-found error; the raw values stay. */
function withCalibration(intervals: Interval[], adjustments: readonly AdjustmentFact[]): Interval[] {
  const layers = adjustments.filter((one) => one.kind === 'calibration' && one.divisor !== null);
  return intervals.flatMap((interval) => {
    const layer = layers.find((one) => one.fromMs < interval.toMs && one.toMs > interval.fromMs);
    if (!layer || interval.volumeM3 === null || interval.basis === 'estimated') return [interval];
    const total = interval.volumeM3;
    const lengthMs = interval.toMs - interval.fromMs;
    const cuts = [
      interval.fromMs,
      Math.max(layer.fromMs, interval.fromMs),
      Math.min(layer.toMs, interval.toMs),
      interval.toMs,
    ];
    return cuts.slice(1).flatMap((toMs, index) => {
      const fromMs = cuts[index]!;
      if (toMs <= fromMs) return [];
      const share = total.times(toMs - fromMs).div(lengthMs);
      const isInside = fromMs >= layer.fromMs && toMs <= layer.toMs;
      return [
        {
          ...interval,
          fromMs,
          toMs,
          volumeM3: isInside ? share.div(layer.divisor!) : share,
          factIds: [...interval.factIds, ...(isInside ? [layer.id] : [])],
        },
      ];
    });
  });
}

/**
 * Intervals of a meter from its readings, events and layers; computed, never edited.
 * A held reading counts as not read. A reading below the last one without a rollover or an event is a question, never a negative volume.
 * @returns intervals in order of time, and findings for the questions
 * @source method section 12
 */
export function computeIntervals(facts: MeterFacts): { intervals: Interval[]; findings: Finding[] } {
  const points = livePoints(facts);
  const events = [...facts.events].sort((a, b) => a.observedAtMs - b.observedAtMs);
  const first = points[0];
  let spec = facts.spec;
  for (const event of events) if (first && event.observedAtMs <= first.atMs) spec = specAfter(spec, event);
  const raw: Interval[] = [];
  for (let index = 1; index < points.length; index += 1) {
    const before = points[index - 1]!;
    const after = points[index]!;
    const between = events.filter(
      (event) => event.observedAtMs > before.atMs && event.observedAtMs <= after.atMs,
    );
    const made = intervalsBetween(before, after, spec, between);
    spec = made.spec;
    raw.push(...made.intervals);
  }
  const intervals = withCalibration(withEstimates(raw, facts.adjustments), facts.adjustments);
  const findings = intervals
    .filter((interval) => interval.heldBecause)
    .map((interval): Finding => ({
      code: interval.heldBecause!,
      severity: 'stops',
      subjectId: interval.factIds[1]!,
      sentence:
        interval.heldBecause === 'dispute'
          ? `Two readings of one time differ. Their interval is out of the totals until one is chosen.`
          : `The register went down from ${interval.opening} to ${interval.closing} and nobody has said why. The interval is out of the totals.`,
    }));
  return { intervals, findings };
}
