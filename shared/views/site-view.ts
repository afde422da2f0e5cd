import type { DefectLeakage } from '../water-balance/liner-leakage.ts';
import type { CoverKind } from '../water-balance/cover-types.ts';

/** A site and everything it is made of, as the API gives it. Exact numbers are text. */
export interface SiteStructureView {
  site: {
    id: string;
    slug: string;
    name: string;
    latitudeDeg: string;
    elevationM: string;
    displayUnits: 'metric' | 'us';
    openedOn: string;
    reportDueDays: number;
    certificationText: string | null;
  };
  settingsTag: string;
  dayRules: { validFromOn: string; timeZone: string; dayBoundary: string }[];
  cells: { id: string; code: string; name: string; openedOn: string; closedOn: string | null }[];
  cellAreas: { cellId: string; validFromOn: string; linedAreaM2: string; evidence: string | null }[];
  plots: {
    id: string;
    cellId: string;
    parentId: string | null;
    name: string;
    areaM2: string;
    fromOn: string;
    toOn: string | null;
  }[];
  coverPeriods: {
    id: string;
    plotId: string;
    coverTypeId: string;
    fromOn: string;
    toOn: string | null;
    evidence: string;
  }[];
  coverTypes: {
    id: string;
    kind: string;
    name: string;
    availableWaterMm: string;
    membranePassFraction: string | null;
    membraneDefects: DefectLeakage | null;
    curveNumber: string | null;
    runoffCoefficientWet: string;
    runoffCoefficientDry: string;
    runoffDestination: 'storm-water' | 'leachate';
    petFactor: string;
    source: string;
    confirmedAt: string | null;
  }[];
  wastePlaced: { id: string; cellId: string; month: string; massT: string }[];
  places: { id: string; kind: string; name: string; cellId: string | null }[];
  sumps: {
    id: string;
    placeId: string;
    cellId: string;
    code: string;
    kind: 'primary' | 'leak-detection';
    areaServedM2: string;
    linerLowPointAboveFloorM: string;
    sensorAboveFloorM: string;
    headLimitM: string | null;
    actionRateLPerHaDay: string | null;
  }[];
  meters: {
    id: string;
    code: string;
    name: string;
    fromPlaceId: string;
    toPlaceId: string;
    digits: number;
    decimals: number;
    unit: string;
    multiplier: string;
    rateM3PerDayMax: string;
    installedOn: string;
  }[];
  meterEvents: {
    id: string;
    meterId: string;
    kind: string;
    observedAt: string;
    siteDay: string;
    registerBefore: string | null;
    registerAfter: string | null;
    unitAfter: string | null;
    multiplierAfter: string | null;
    note: string | null;
  }[];
  stores: {
    id: string;
    placeId: string;
    code: string;
    isCovered: boolean;
    linedAreaM2: string;
    crestLevelM: string;
    operatingLevelM: string;
  }[];
  storeLevels: { storeId: string; levelM: string; volumeM3: string; surfaceM2: string }[];
  stations: { id: string; name: string; kind: string; source: string }[];
  roundPoints: { id: string; position: number; kind: string; subjectId: string; everyDays: number }[];
}

export interface ClimateView {
  months: {
    month: string;
    precipitationMm: number;
    tMeanC: number | null;
    tMinC: number | null;
    tMaxC: number | null;
    petMm: number | null;
    rainDayCount: number;
    temperatureDayCount: number;
    dayCount: number;
    isComplete: boolean;
    rainStation: string | null;
    temperatureStation: string | null;
    choice: string | null;
    isSettled: boolean;
  }[];
  uploads: {
    id: string;
    fileName: string;
    uploadedAt: string;
    counts: { read: number; held: number };
    confirmedAt: string | null;
    undoneAt: string | null;
  }[];
}

export interface CoverShare {
  kind: CoverKind;
  name: string;
  share: number;
}

export interface TrailView {
  rows: {
    id: string;
    sequence: number;
    at: string;
    by: string;
    action: string;
    subjectType: string;
    subjectId: string;
    sentence: string;
    reason: string | null;
    before: unknown;
    after: unknown;
  }[];
  nextBefore: number | null;
}

export interface TrailCheckView {
  sealedCount: number;
  unsealedCount: number;
  headHash: string;
  firstFault: string | null;
}

export interface PeopleView {
  people: {
    membershipId: string;
    personId: string;
    displayName: string;
    email: string;
    role: string;
    hasPassword: boolean;
  }[];
  laboratories: { id: string; name: string }[];
}

export interface EntranceView {
  isEmpty: boolean;
  demoPeople: { email: string; displayName: string; role: string }[];
  hasMailCatcher: boolean;
}

export interface CaughtMailView {
  id: string;
  caughtAt: string;
  to: string;
  subject: string;
  text: string;
}
