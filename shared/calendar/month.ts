/** A calendar month as text, 'YYYY-MM'. Months and days are text, because clocks move midnights. */
export type Month = string;

const monthPattern = /^(\d{4})-(0[1-9]|1[0-2])$/;
const names = [
  'January',
  'February',
  'March',
  'April',
  'May',
  'June',
  'July',
  'August',
  'September',
  'October',
  'November',
  'December',
];

export const isMonth = (text: string): boolean => monthPattern.test(text);

/** @returns year and month 1–12. @throws RangeError for other text */
export function monthParts(month: Month): { year: number; monthOfYear: number } {
  const match = monthPattern.exec(month);
  if (!match) throw new RangeError(`"${month}" is not a month like 2026-03.`);
  return { year: Number(match[1]), monthOfYear: Number(match[2]) };
}

export const monthOf = (year: number, monthOfYear: number): Month =>
  `${String(year).padStart(4, '0')}-${String(monthOfYear).padStart(2, '0')}`;

/** @example addMonths('2026-11', 3) // '2027-02' */
export function addMonths(month: Month, count: number): Month {
  const { year, monthOfYear } = monthParts(month);
  const index = year * 12 + monthOfYear - 1 + count;
  return monthOf(Math.floor(index / 12), (index % 12) + 1);
}

/** Months from one to another; negative when the second comes first. */
export function monthsBetween(from: Month, to: Month): number {
  const [a, b] = [monthParts(from), monthParts(to)];
  return (b.year - a.year) * 12 + b.monthOfYear - a.monthOfYear;
}

/** Months from the first to the last, both included. */
export function monthRange(first: Month, last: Month): Month[] {
  const months: Month[] = [];
  for (let month = first; month <= last; month = addMonths(month, 1)) months.push(month);
  return months;
}

const isLeap = (year: number) => (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0;

export function daysInMonth(month: Month): number {
  const { year, monthOfYear } = monthParts(month);
  return [31, isLeap(year) ? 29 : 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31][monthOfYear - 1]!;
}

/** @example monthName('2026-07') // 'July 2026' */
export function monthName(month: Month): string {
  const { year, monthOfYear } = monthParts(month);
  return `${names[monthOfYear - 1]} ${year}`;
}

export const monthShortName = (month: Month): string => names[monthParts(month).monthOfYear - 1]!.slice(0, 3);

/** Calendar quarter of a month, 'YYYY-Qn'. */
export function quarterOf(month: Month): string {
  const { year, monthOfYear } = monthParts(month);
  return `${year}-Q${Math.ceil(monthOfYear / 3)}`;
}

/** The three months of 'YYYY-Qn'. @throws RangeError for other text */
export function quarterMonths(quarter: string): Month[] {
  const match = /^(\d{4})-Q([1-4])$/.exec(quarter);
  if (!match) throw new RangeError(`"${quarter}" is not a quarter like 2026-Q3.`);
  const first = monthOf(Number(match[1]), (Number(match[2]) - 1) * 3 + 1);
  return [first, addMonths(first, 1), addMonths(first, 2)];
}

/** @example quarterName('2026-Q2') // 'April to June 2026' */
export function quarterName(quarter: string): string {
  const months = quarterMonths(quarter);
  return `${names[monthParts(months[0]!).monthOfYear - 1]} to ${monthName(months[2]!)}`;
}
