import { median, sampleCorrelation } from 'simple-statistics';
import { monthName } from '../calendar/month.ts';
import { counted } from '../count-words.ts';
import { dayNameShort } from '../calendar/day.ts';
import type { Finding } from '../findings.ts';
import type { ComparedMonth } from './compare-months.ts';
import { causesWithoutEvent, type MassBreak } from './double-mass.ts';
import { compareTolerance } from './tolerance.ts';
import { correlationAtLag } from './fit-statistics.ts';

const round = (value: number) => Math.round(value).toLocaleString('en-GB').replaceAll(',', '\u2009');
const signed = (value: number) => `${value < 0 ? '−' : '+'}${round(Math.abs(value))}`;
const listed = (rows: readonly ComparedMonth[]) => rows.map((row) => monthName(row.month)).join(', ');

type Measured = ComparedMonth & { measuredM3: number; differenceM3: number };
const isMeasured = (row: ComparedMonth): row is Measured => row.measuredM3 !== null;

function rollingFinding(rows: readonly ComparedMonth[]): Finding[] {
  const last = rows.findLast(isMeasured)!;
  const { rolling } = last;
  const difference = rolling.measuredM3 - rolling.predictedM3;
  const { valueM3: tolerance } = compareTolerance({
    predictedM3: rolling.predictedM3,
    measuredM3: rolling.measuredM3,
    areaM2: last.areaM2,
    monthCount: rolling.monthCount,
  });
  const percent =
    rolling.percent === null
      ? ''
      : `, ${rolling.percent < 0 ? '−' : '+'}${Math.abs(rolling.percent).toFixed(1)} %`;
  return [
    {
      code: 'rolling-twelve',
      severity: Math.abs(difference) <= tolerance ? 'note' : 'ask',
      difference,
      tolerance,
      unit: 'm³',
      when: last.month,
      sentence: `${rolling.monthCount} of 12 months to ${monthName(last.month)}: ${round(rolling.measuredM3)} m³ pumped against ${round(rolling.predictedM3)} predicted${percent}.`,
    },
  ];
}

function streakFinding(rows: readonly ComparedMonth[]): Finding[] {
  const measured = rows.filter(isMeasured);
  const last = measured.at(-1)!;
  let streak = 0;
  for (const row of [...measured].reverse()) {
    if (row.isInside !== false || Math.sign(row.differenceM3) !== Math.sign(last.differenceM3)) break;
    streak += 1;
  }
  if (streak < 3) return [];
  return [
    {
      code: 'months-in-a-row',
      severity: 'ask',
      difference: last.differenceM3,
      tolerance: last.tolerance!.valueM3,
      unit: 'm³',
      when: last.month,
      sentence: `${streak} months in a row ${last.differenceM3 > 0 ? 'more' : 'less'} was pumped than predicted; ${monthName(last.month)} by ${signed(last.differenceM3)} m³.`,
    },
  ];
}

function breakFinding(found: MassBreak | null): Finding[] {
  if (!found) return [];
  const { slopeBefore, slopeAfter, ratio, events } = found;
  const nearest = events[0];
  const why = nearest
    ? `Nearest dated event: ${dayNameShort(nearest.onDay)}, ${nearest.sentence}.`
    : `No dated event is near: ${causesWithoutEvent.join(', ')} are possible.`;
  return [
    {
      code: 'slope-break',
      severity: 'ask',
      when: found.month,
      sentence: `Each cubic metre predicted brought ${slopeBefore.toFixed(2)} pumped before ${monthName(found.month)}, ${slopeAfter.toFixed(2)} from then on (ratio ${ratio.toFixed(2)}). ${why}`,
    },
  ];
}

function lagFinding(pairs: readonly { predicted: number; measured: number }[]): Finding[] {
  const lags = [0, 1, 2, 3].flatMap((lag) => {
    const found = correlationAtLag(pairs, lag);
    return found ? [{ lag, ...found }] : [];
  });
  const best = [...lags].sort((a, b) => b.r - a.r)[0];
  const none = lags.find((one) => one.lag === 0);
  if (!best || !none || best.lag === 0) return [];
  return [
    {
      code: 'lag',
      severity: 'note',
      sentence: `Pumped follows predicted ${counted(best.lag, 'month', 'months')} later: correlation ${best.r.toFixed(3)} against ${none.r.toFixed(3)} without delay (${best.pairCount} pairs).`,
    },
  ];
}

/** @assumed our choices: what counts as dry, as far too much, as a large recharge */
const dryMm = 10;
const muchOver = 2;
const monthsForRain = 8;
const stormCorrelation = 0.7;

/** Shapes of the differences that speak for a cause; possibilities, never conclusions. */
function shapeFindings(rows: readonly Measured[]): Finding[] {
  const findings: Finding[] = [];
  const outside = rows.filter((row) => row.isInside === false);
  const dry = outside.filter((row) => row.rainMm < dryMm && row.measuredM3 > muchOver * row.predictedM3);
  if (dry.length)
    findings.push({
      code: 'dry-and-flowing',
      severity: 'ask',
      sentence: `Dry months with far more flow than predicted: ${listed(dry)}. Groundwater, condensate, liquid returned or a pump on a timer are possible.`,
    });
  const usualM3 = median(rows.map((row) => row.predictedM3));
  const silent = outside.filter(
    (row) => row.predictedM3 > 2 * usualM3 && row.measuredM3 < row.predictedM3 / muchOver,
  );
  if (silent.length)
    findings.push({
      code: 'no-response',
      severity: 'ask',
      sentence: `A large recharge without an answer at the sump: ${listed(silent)}. A stuck pump or register, a full tank or mounding are possible.`,
    });
  const more = outside.filter((row) => row.differenceM3 > 0);
  if (rows.length >= monthsForRain && more.length >= 2) {
    const r = sampleCorrelation(
      rows.map((row) => row.rainMm),
      rows.map((row) => row.differenceM3),
    );
    if (r > stormCorrelation)
      findings.push({
        code: 'grows-with-rain',
        severity: 'ask',
        sentence: `What is pumped beyond the prediction grows with the month's rain (correlation ${r.toFixed(2)}, ${rows.length} months). Storm water entering is possible.`,
      });
  }
  return findings;
}

/**
 * What the months say, in sentences with signed difference and tolerance.
 * @param found break of the double-mass curve over a longer span, or null
 * @source method section 9
 */
export function compareFindings(
  rows: readonly ComparedMonth[],
  cellCode: string,
  found: MassBreak | null,
): Finding[] {
  const measured = rows.filter(isMeasured);
  if (!measured.length)
    return [
      {
        code: 'nothing-measured',
        severity: 'ask',
        sentence: `Nothing was measured at ${cellCode} in these months.`,
      },
    ];
  return [
    ...rollingFinding(rows),
    ...streakFinding(rows),
    ...breakFinding(found),
    ...shapeFindings(measured),
    ...lagFinding(measured.map((row) => ({ predicted: row.predictedM3, measured: row.measuredM3 }))),
  ];
}
