import type { LabLayout } from '../lab/detect-layout.ts';
import type { LabRow } from '../lab/lab-row.ts';
import type { Verdict } from '../limits/evaluate-limit.ts';

export interface ImportCounts {
  read: number;
  ok: number;
  warned: number;
  held: number;
  skipped: number;
}

export interface LabResultView {
  id: string;
  siteDay: string;
  pointCode: string;
  analyteName: string;
  analyteId: string;
  samplePointId: string;
  fraction: string;
  comparator: string;
  value: string | null;
  unit: string;
  reportingLimit: string | null;
  qualifier: string | null;
  missingReason: string | null;
  printedDecimals: number | null;
  rawText: string;
  rawUnit: string | null;
  sheet: string | null;
  cell: string | null;
  importId: string | null;
  isRevision: boolean;
}

export interface LabView {
  laboratories: { id: string; name: string }[];
  points: { id: string; code: string; name: string }[];
  analytes: { id: string; name: string; standardUnit: string; defaultFraction: string | null }[];
  uploads: {
    id: string;
    fileName: string;
    uploadedAt: string;
    by: string;
    counts: ImportCounts;
    confirmedAt: string | null;
    undoneAt: string | null;
    jobNumber: string | null;
  }[];
  results: LabResultView[];
  plan: {
    id: string;
    pointCode: string;
    analyteName: string;
    fraction: string;
    expectedCount: number;
    receivedCount: number;
    turnaroundDays: number;
  }[];
}

export interface LabImportView {
  id: string;
  fileName: string;
  fileSha256: string;
  uploadedAt: string;
  confirmedAt: string | null;
  undoneAt: string | null;
  counts: ImportCounts;
  laboratoryId: string | null;
  reading: {
    shape: LabLayout['shape'];
    jobNumber: string | null;
    notes: string[];
    skipped: { sheet: string; rowNumber: number; text: string; why: string }[];
    qualifierKey: { letter: string; words: string }[];
    preview: { number: number; cells: string[] }[];
    sheetName: string;
    headerRow: number;
    dateOrder: 'day-first' | 'month-first' | null;
    equalToLimit?: 'below' | 'measured' | null;
  };
  rows: (LabRow & { pointCode: string | null; analyteName: string | null })[];
  points: { id: string; code: string; name: string }[];
  analytes: { id: string; name: string; basis: string | null }[];
}

export interface ClimateImportView {
  id: string;
  fileName: string;
  fileSha256: string;
  counts: ImportCounts;
  confirmedAt: string | null;
  undoneAt: string | null;
  mapping: import('../climate/read-climate-sheet.ts').ClimateMapping;
  headers: string[];
  notes: string[];
  /** What the columns look like as a whole, with the cure. */
  doubts: string[];
  problems: import('../climate/read-climate-sheet.ts').ClimateRow[];
  rows: import('../climate/read-climate-sheet.ts').ClimateRow[];
  rowCount: number;
}

export interface LimitRowView {
  id: string;
  statistic: string;
  quantity: string;
  valueText: string | null;
  lowText: string | null;
  highText: string | null;
  unit: string;
  isInclusive: boolean;
  samplesMin: number;
  belowDetectionRule: string;
  citation: string;
  fraction: string;
  confirmedAt: string | null;
  confirmedBy: string | null;
}

export interface LimitsView {
  quarter: string;
  months: string[];
  now: string;
  permits: {
    id: string;
    number: string;
    authority: string;
    regime: string;
    fromOn: string;
    toOn: string | null;
  }[];
  verdicts: {
    month: string;
    pointCode: string;
    analyteName: string;
    verdict: Verdict;
    limit: LimitRowView;
  }[];
  exceedances: {
    id: string;
    sentence: string;
    month: string;
    periodKey: string;
    seenAt: string;
    seenBy: string;
    /** False when the results behind an open exceedance were undone or revised and no longer exceed. */
    isStanding: boolean;
    closedAt: string | null;
    cause: string | null;
    clocks: {
      id: string;
      step: string;
      dueAt: string;
      citation: string;
      doneAt: string | null;
      doneBy: string | null;
      doneNote: string | null;
    }[];
    notes: { id: string; note: string; writtenAt: string; by: string }[];
  }[];
}

export interface LimitChoicesView {
  permits: { id: string; number: string }[];
  samplePoints: { id: string; code: string; name: string }[];
  analytes: { id: string; name: string; standardUnit: string; defaultFraction: string | null }[];
  places: { id: string; kind: string; name: string }[];
}

export interface ReportView {
  quarter: string;
  name: string;
  dueOn: string;
  due: string;
  certification: string | null;
  readiness: { state: 'ready' | 'stops' | 'ask'; sentence: string; link: string | null }[];
  cells: { code: string; name: string }[];
  months: string[];
  cellMonths: {
    cellCode: string;
    month: string;
    areaM2: number;
    isOpen: boolean;
    predictedM3: number | null;
    measuredM3: number | null;
    estimatedM3: number;
    allocatedM3: number;
  }[];
  verdicts: {
    analyteName: string;
    pointCode: string;
    month: string;
    statistic: string;
    quantity: string;
    limit: string;
    unit: string;
    valueText: string | null;
    word: string;
  }[];
  leakDetection: {
    sumpCode: string;
    month: string;
    volumeM3: number | null;
    dayCount: number;
    lPerHaDay: number | null;
    actionRateLPerHaDay: number | null;
  }[];
  run: { kind: string; number: number | null; isAccepted: boolean };
  changes: { name: string; issued: number; now: number }[];
  issues: {
    id: string;
    quarter: string;
    issue: number;
    signedAt: string;
    signedBy: string;
    fileName: string;
    fileSha256: string;
    isStale: boolean;
    isLast: boolean;
  }[];
}
