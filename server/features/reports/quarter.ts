import type { Month } from '#shared/calendar/month.ts';
import type { Interval } from '#shared/ledger/intervals.ts';
import type { BalanceParameters, EngineCover } from '#shared/water-balance/engine-input.ts';
import type { StepTerms } from '#shared/water-balance/terms.ts';
import type { readLedger } from '../ledger/ledger-view.ts';
import type { JudgedLimit } from '../limits/verdict-service.ts';
import type { SiteRecord } from '../sites/site-service.ts';

/** One plot and step of the quarter with all that the workbook's formulas need. */
export interface QuarterStep {
  cellCode: string;
  plotName: string;
  plotId: string;
  coverName: string;
  cover: EngineCover;
  month: Month;
  fromOn: string;
  dayCount: number;
  areaM2: number;
  runoffCoefficient: number;
  terms: StepTerms;
}

export interface QuarterCellMonth {
  cellId: string;
  cellCode: string;
  month: Month;
  areaM2: number;
  /** False before the cell opened: nothing is expected of it. */
  isOpen: boolean;
  /** Null where the run does not reach the month. */
  predictedM3: number | null;
  /** Null where nothing was read. */
  measuredM3: number | null;
  estimatedM3: number;
  allocatedM3: number;
}

export interface QuarterDay {
  meterCode: string;
  siteDay: string;
  month: Month;
  basis: string;
  volumeM3: number;
  from: string;
  to: string;
  /** Cell the water is counted for, with the sign it counts; '' when it is not a cell's leachate. */
  cellCode: string;
  counts: number;
}

/** Everything the quarter's report is made of, from one transaction. */
export interface Quarter {
  site: SiteRecord['site'];
  quarter: string;
  months: Month[];
  dueOn: string;
  generatedAt: string;
  run: {
    kind: string;
    number: number | null;
    engineVersion: string;
    inputSha256: string;
    isAccepted: boolean;
  };
  parameters: BalanceParameters;
  parameterSet: string;
  cells: { code: string; name: string }[];
  steps: QuarterStep[];
  cellMonths: QuarterCellMonth[];
  /** The whole site over the twelve months to the end of the quarter; null where nothing was read. */
  history: { month: Month; predictedM3: number; measuredM3: number | null }[];
  intervals: (Interval & { meterCode: string; from: string; to: string; hours: number })[];
  days: QuarterDay[];
  stores: {
    month: Month;
    name: string;
    balance: Awaited<ReturnType<typeof readLedger>>['stores'][number]['balance'];
  }[];
  loads: { month: Month; count: number; nominalM3: number; receivedM3: number }[];
  leakDetection: {
    sumpCode: string;
    month: Month;
    volumeM3: number | null;
    dayCount: number;
    lPerHaDay: number | null;
    actionRateLPerHaDay: number | null;
  }[];
  verdicts: JudgedLimit[];
  results: {
    pointCode: string;
    siteDay: string;
    analyteName: string;
    fraction: string;
    comparator: string;
    value: number | null;
    unit: string;
    laboratory: string;
    file: string;
    rawText: string;
    missingReason: string | null;
    qualifier: string | null;
  }[];
  notes: { when: string; subject: string; sentence: string }[];
}
