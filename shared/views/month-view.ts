export interface TubeState {
  receivedCount: number;
  expectedCount: number;
}

export interface StripMonth {
  month: string;
  climate: TubeState;
  meters: TubeState;
  lab: TubeState;
  lid: 'closed' | 'ajar' | 'none';
  isFuture: boolean;
  isRunning: boolean;
}

export interface StripView {
  months: StripMonth[];
  yearStart: string;
  today: string;
}

/** State of one expected record of a day. */
export type DayState = 'read' | 'apportioned' | 'estimated' | 'not-read' | 'missing' | 'held' | 'none';

export interface GridLine {
  name: string;
  series: 'rain' | 'pumped' | 'effluent';
  days: DayState[];
}

export interface MonthLine {
  subject: string;
  sentence: string;
  link: string | null;
  linkText: string | null;
}

export interface MonthView {
  month: string;
  title: string;
  today: string;
  grid: GridLine[];
  missing: MonthLine[];
  odd: MonthLine[];
  cells: {
    code: string;
    name: string;
    cover: string;
    areaM2: number | null;
    predictedM3: number | null;
    measuredM3: number | null;
    differenceM3: number | null;
    percent: number | null;
    isAllocated: boolean;
    estimatedPercent: number;
  }[];
  obstacles: string[];
  act: { act: 'close' | 'reopen'; at: string; reason: string | null } | null;
  lateCount: number;
}

export interface StoreBalanceView {
  openingM3: number;
  inM3: number;
  outM3: number;
  rainM3: number;
  evaporationM3: number;
  expectedClosingM3: number;
  measuredClosingM3: number;
  unaccountedM3: number;
  toleranceM3: number;
  isInside: boolean;
}

export interface LedgerView {
  month: string;
  flows: {
    fromPlaceId: string;
    toPlaceId: string;
    from: string;
    to: string;
    volumeM3: number;
    bases: Record<string, number>;
  }[];
  stores: {
    id: string;
    placeId: string;
    code: string;
    name: string;
    openingLevelM: number | null;
    closingLevelM: number | null;
    balance: StoreBalanceView | null;
    missing: string | null;
    weather: string;
  }[];
  entries: {
    id: string;
    siteDay: string;
    from: string;
    to: string;
    volumeM3: string;
    basis: string;
    reason: string | null;
    meterCode: string | null;
    by: string;
    recordedAt: string;
    reversesId: string | null;
  }[];
  loads: {
    count: number;
    nominalM3: number;
    receivedM3: number;
    receivedCount: number;
    rows: {
      id: string;
      siteDay: string;
      ticket: string;
      hauler: string;
      nominalVolumeM3: string | null;
      receivedVolumeM3: string | null;
      officialVolume: string;
    }[];
  };
  pending: { id: string; sentence: string }[];
  act: 'close' | 'reopen' | null;
}

export interface EntrySourceView {
  id: string;
  siteDay: string;
  volumeM3: string;
  basis: string;
  reason: string | null;
  recordedAt: string;
  by: string;
  facts: { id: string; kind: string; when: string; words: string; by: string; note: string | null }[];
  meter: { code: string; name: string } | undefined;
  intervals: {
    from: string;
    to: string;
    hours: number;
    opening: string;
    closing: string;
    wrap: string;
    multiplier: string;
    unit: string;
    volumeM3: string | null;
    basis: string;
    heldBecause: string | null;
  }[];
}
