import type { RegisterSpec } from '../ledger/register.ts';

export interface PointDone {
  id: string;
  text: string;
  at: string;
  /** Instant it was seen, to keep it when it is corrected. */
  observedAt: string;
  by: string;
  state: 'stored' | 'held' | 'dispute';
}

/** One point of the round: what was seen last, what is usual, what is in already. */
export interface RoundPointView {
  id: string;
  position: number;
  kind: 'meter' | 'level' | 'rain' | 'load-out';
  subjectId: string;
  everyDays: number;
  notRead: { reasonCode: string; note: string | null } | null;
  name: string;
  code: string;
  last: { text: string; value: string; observedAt: string; at: string } | null;
  done: PointDone[];
  register?: RegisterSpec;
  rateM3PerDayMax?: number;
  usual?: { lowM3: number; highM3: number } | null;
  operatingLevelM?: number | null;
  crestLevelM?: number | null;
}

export interface RoundView {
  day: string;
  today: string;
  nowLocal: string;
  points: RoundPointView[];
  loads: {
    id: string;
    ticket: string;
    hauler: string;
    at: string;
    nominalVolumeM3: string | null;
    receivedVolumeM3: string | null;
    officialVolume: string;
  }[];
  loadPlaces: { from: { id: string; name: string }[]; to: { id: string; name: string }[] };
  notes: { id: string; siteDay: string; note: string; by: string }[];
}
