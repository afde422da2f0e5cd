import { addMonths, quarterOf } from '#shared/calendar/month.ts';
import { lastDay } from '#shared/calendar/day.ts';
import type { Permission } from '#shared/permissions.ts';

export type Area =
  | 'month'
  | 'round'
  | 'balance'
  | 'compare'
  | 'ledger'
  | 'lab'
  | 'limits'
  | 'report'
  | 'ahead'
  | 'site'
  | 'trail'
  | 'method';

/** The areas in the order of the work; a role sees those it can read. */
export const areas: { area: Area; name: string; permission: Permission }[] = [
  { area: 'month', name: 'Month', permission: 'read:record' },
  { area: 'round', name: 'Round', permission: 'read:record' },
  { area: 'balance', name: 'Balance', permission: 'read:record' },
  { area: 'compare', name: 'Compare', permission: 'read:record' },
  { area: 'ledger', name: 'Ledger', permission: 'read:record' },
  { area: 'lab', name: 'Lab', permission: 'read:lab' },
  { area: 'limits', name: 'Limits', permission: 'read:record' },
  { area: 'report', name: 'Report', permission: 'read:record' },
  { area: 'ahead', name: 'Ahead', permission: 'read:record' },
  { area: 'site', name: 'Site', permission: 'read:record' },
  { area: 'trail', name: 'Trail', permission: 'read:trail' },
  { area: 'method', name: 'Method', permission: 'read:record' },
];

/** Address of an area for a month: Round has days, Report has quarters, Ahead, Site, Trail and Method have none. */
export function areaPath(slug: string, area: Area, month: string, today: string): string {
  const base = `/sites/${slug}/${area}`;
  if (area === 'round') return `${base}/${today.startsWith(month) ? today : lastDay(month)}`;
  if (area === 'report') return `${base}/${quarterOf(month)}`;
  if (area === 'ahead' || area === 'site' || area === 'trail' || area === 'method') return base;
  return `${base}/${month}`;
}

/** Month that a period of an address stands for: a day, a month or a quarter. */
export function monthOfPeriod(period: string | undefined): string | null {
  if (!period) return null;
  const quarter = /^(\d{4})-Q([1-4])$/.exec(period);
  if (quarter) return addMonths(`${quarter[1]}-01`, Number(quarter[2]) * 3 - 1);
  return /^\d{4}-\d{2}/.test(period) ? period.slice(0, 7) : null;
}
