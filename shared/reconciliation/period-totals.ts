import { daysInMonth, monthParts, type Month } from '../calendar/month.ts';
import { gpadInLPerHaDay } from '../units/unit-factors.ts';

export interface PeriodMonth {
  month: Month;
  areaM2: number;
  rainMm: number;
  predictedM3: number;
  /** Null when nothing was measured: a hole, never a zero. */
  measuredM3: number | null;
}

/** One side of the comparison over a period, in every unit an engineer asks for. */
export interface PeriodSide {
  volumeM3: number;
  depthMm: number;
  /** Null without rain. */
  percentOfRain: number | null;
  lPerHaDay: number;
  galPerAcreDay: number;
}

export interface PeriodTotal {
  name: 'month' | 'rolling-twelve' | 'calendar-year' | 'since-opening';
  first: Month;
  last: Month;
  /** Months with both sides, and months of the period. */
  countedCount: number;
  monthCount: number;
  predicted: PeriodSide | null;
  measured: PeriodSide | null;
  differenceM3: number | null;
  differenceMm: number | null;
  /** Of the predicted; null where it is not defined. */
  percent: number | null;
  /** Muted while the prediction of the period lies under the floor of each of its months. */
  isPercentMuted: boolean;
}

function side(rows: readonly PeriodMonth[], pick: (row: PeriodMonth) => number): PeriodSide {
  const sum = (of: (row: PeriodMonth) => number) => rows.reduce((total, row) => total + of(row), 0);
  const volumeM3 = sum(pick);
  const depthMm = sum((row) => (pick(row) / row.areaM2) * 1000);
  const rainMm = sum((row) => row.rainMm);
  const hectareDays = sum((row) => (row.areaM2 / 10_000) * daysInMonth(row.month));
  const lPerHaDay = (volumeM3 * 1000) / hectareDays;
  return {
    volumeM3,
    depthMm,
    percentOfRain: rainMm > 0 ? (100 * depthMm) / rainMm : null,
    lPerHaDay,
    galPerAcreDay: lPerHaDay / gpadInLPerHaDay.toNumber(),
  };
}

function totalOf(
  name: PeriodTotal['name'],
  months: readonly PeriodMonth[],
  percentFloorMm: number,
): PeriodTotal {
  const counted = months.filter((row) => row.measuredM3 !== null && row.areaM2 > 0);
  const predicted = counted.length ? side(counted, (row) => row.predictedM3) : null;
  const measured = counted.length ? side(counted, (row) => row.measuredM3!) : null;
  const differenceM3 = predicted && measured ? measured.volumeM3 - predicted.volumeM3 : null;
  return {
    name,
    first: months[0]!.month,
    last: months.at(-1)!.month,
    countedCount: counted.length,
    monthCount: months.length,
    predicted,
    measured,
    differenceM3,
    differenceMm: predicted && measured ? measured.depthMm - predicted.depthMm : null,
    percent:
      differenceM3 === null || predicted!.volumeM3 === 0 ? null : (100 * differenceM3) / predicted!.volumeM3,
    isPercentMuted: predicted !== null && predicted.depthMm < percentFloorMm * counted.length,
  };
}

/**
 * Month, rolling twelve, calendar year so far and since opening, each over the months that have both sides.
 * @param rows months in order, the last is the one looked at; empty gives nothing
 * @source method section 9
 */
export function periodTotals(rows: readonly PeriodMonth[], percentFloorMm: number): PeriodTotal[] {
  const last = rows.at(-1);
  if (!last) return [];
  const { year } = monthParts(last.month);
  return [
    totalOf('month', [last], percentFloorMm),
    totalOf('rolling-twelve', rows.slice(-12), percentFloorMm),
    totalOf(
      'calendar-year',
      rows.filter((row) => monthParts(row.month).year === year),
      percentFloorMm,
    ),
    totalOf('since-opening', rows, percentFloorMm),
  ];
}
