import type { MassBreak } from '../reconciliation/double-mass.ts';
import type { PeriodTotal } from '../reconciliation/period-totals.ts';
import type { BalanceParameters } from '../water-balance/engine-input.ts';
import type { WorkingLine } from '../water-balance/explain-step.ts';
import type { HeadLine } from '../water-balance/sum-steps.ts';
import type { StepTerms, TermName } from '../water-balance/terms.ts';
import type { CoverShare } from './site-view.ts';

export interface BalanceGroup {
  areaM2: number;
  meanAreaM2: number;
  volumesM3: Record<TermName, number>;
  headLine: HeadLine;
  pumpedM3: number | null;
  /** What reached the waste in the twelve months to this one, m³; null where the run does not hold them all. */
  passedYearM3: number | null;
}

export interface BalanceRunView {
  id: string;
  kind: 'working' | 'frozen';
  number: number | null;
  engineVersion: string;
  problem: string | null;
  computedAt: string;
  acceptedAt: string | null;
}

export interface BalanceView {
  month: string;
  run: BalanceRunView & { isWorking: boolean; warnings: string[] };
  differsFromWorking: boolean;
  stopped: string | null;
  firstMonth: string;
  lastMonth: string;
  climate: {
    rainDayCount: number;
    temperatureDayCount: number;
    dayCount: number;
    rainStation: string | null;
    temperatureStation: string | null;
    choice: string | null;
  } | null;
  site: BalanceGroup;
  cells: (BalanceGroup & {
    id: string;
    code: string;
    name: string;
    plots: {
      stepId: string;
      plotName: string;
      coverName: string;
      fromOn: string;
      dayCount: number;
      areaM2: number;
      terms: StepTerms;
    }[];
  })[];
  closure: { line: string; residualMm: number; toleranceMm: number }[];
  frozenRuns: {
    id: string;
    number: number | null;
    computedAt: string;
    acceptedAt: string | null;
    note: string | null;
  }[];
}

export interface WorkingView {
  title: string;
  plotName: string;
  coverName: string;
  month: string;
  fromOn: string;
  dayCount: number;
  lines: WorkingLine[];
  law: string;
  petMethod: string;
  /** What the run says about this month. */
  warnings: string[];
  parameterSet: { name: string; version: number; isConfirmed: boolean };
  run: { kind: string; number: number | null; computedAt: string; engineVersion: string };
}

export interface ParameterSetView {
  id: string;
  name: string;
  version: number;
  values: BalanceParameters;
  createdAt: string;
  confirmedAt: string | null;
  isCurrent: boolean;
}

export interface ParameterSetsView {
  current: ParameterSetView;
  sets: ParameterSetView[];
}
export type { BalanceParameters };

export interface ComparedRow {
  month: string;
  areaM2: number;
  rainMm: number;
  predictedM3: number;
  measuredM3: number | null;
  differenceM3: number | null;
  percent: number | null;
  isPercentMuted: boolean;
  tolerance: { valueM3: number; reason: string } | null;
  isInside: boolean | null;
  rolling: { predictedM3: number; measuredM3: number; percent: number | null; monthCount: number };
  cumulativePredictedM3: number;
  cumulativeMeasuredM3: number;
  aetMm: number;
  storageMm: number;
  estimatedPercent: number;
  allocatedPercent: number;
  covers: CoverShare[];
  events: { onDay: string; sentence: string; when: string }[];
  note: { cause: string; state: string; note: string } | null;
}

/** Pumped less returned against the run without the return; never mixed with the gross pair. */
export interface NetPair {
  monthCount: number;
  pumpedM3: number;
  returnedM3: number;
  netM3: number;
  predictedM3: number;
}

export interface CompareView {
  cell: { id: string; code: string; name: string };
  cells: { code: string; name: string }[];
  run: BalanceRunView & { isAccepted: boolean; isOutOfDate: boolean };
  percentFloorMm: number;
  /** First month of the balance of the cell: sums run from it. */
  firstMonth: string | null;
  periods: PeriodTotal[];
  rows: ComparedRow[];
  statistics: {
    pairCount: number;
    pbiasPercent: number | null;
    rmse: number | null;
    nashSutcliffe: number | null;
    leftOutCount: number;
  };
  lags: { lagMonths: number; r: number; pairCount: number }[];
  massBreak: MassBreak | null;
  /** Null when nothing was returned in the months shown. */
  net: NetPair | null;
  /** Months shown in which the liquid standing in the sumps could be counted. */
  sumpStorageCount: number;
  receivedM3: number;
  findings: {
    code: string;
    severity: 'stops' | 'ask' | 'note';
    difference?: number;
    tolerance?: number;
    sentence: string;
  }[];
}
