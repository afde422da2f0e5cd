import { addDays, dayName, daysBetween, type Day } from '../calendar/day.ts';
import { hold, warn, type LabRow } from './lab-row.ts';
import type { LabCatalog } from './resolve-lab-rows.ts';
import { decideDateOrder, readSampledDate, type DateOrder, type SampledDate } from './read-sampled-date.ts';

const daysBeforeReceiptMax = 180;
const isInWindow = (day: Day, receivedOn: Day) =>
  day <= receivedOn && daysBetween(day, receivedOn) <= daysBeforeReceiptMax;

/** Days that a bare number means in the two date systems of workbooks, and its time; null when it is no such number. */
function readSerial(text: string): { in1900: Day; in1904: Day; time: string | null } | null {
  const match = /^(\d{5})(\.\d+)?$/.exec(text.trim());
  if (!match) return null;
  const minutes = Math.round(Number(match[2] ?? 0) * 1440) % 1440;
  const pad = (value: number) => String(value).padStart(2, '0');
  return {
    in1900: addDays('1899-12-30', Number(match[1])),
    in1904: addDays('1904-01-01', Number(match[1])),
    time: match[2] ? `${pad(Math.floor(minutes / 60))}:${pad(minutes % 60)}` : null,
  };
}

/** An ISO instant with its zone, as the site's clock showed it; null for a text without a zone. */
function readInstant(text: string, catalog: LabCatalog): SampledDate | null {
  if (!/^\d{4}-\d{2}-\d{2}[T ]\d{2}:\d{2}(:\d{2}(\.\d+)?)?(Z|[+-]\d{2}:?\d{2})$/.test(text.trim()))
    return null;
  const instantMs = Date.parse(text.trim().replace(' ', 'T'));
  if (Number.isNaN(instantMs)) return null;
  const local = catalog.localTime(instantMs);
  return { day: local.slice(0, 10), time: local.slice(11) };
}

export interface FileDateOrder {
  order: DateOrder;
  /** The order follows only from other dates of the file that read one way. */
  isFromOthers: boolean;
}

/**
 * Order of day and month in a file: an answer, a part above 12, or the one order in which every two-way date falls on a
 * day that another row gives beyond doubt.
 */
export function dateOrderOf(texts: readonly string[], catalog: LabCatalog): FileDateOrder {
  const order = catalog.answers.dateOrder ?? decideDateOrder(texts);
  if (order) return { order, isFromOthers: false };
  const known = new Set<Day>();
  const twoWay: string[] = [];
  for (const text of texts) {
    const serial = readSerial(text);
    const read = readSampledDate(text, null);
    if (serial && isInWindow(serial.in1900, catalog.receivedOn)) known.add(serial.in1900);
    else if (read === 'ambiguous') twoWay.push(text);
    else if (read) known.add(read.day);
  }
  const fits = (['day-first', 'month-first'] as const).filter((one) =>
    twoWay.every((text) => {
      const read = readSampledDate(text, one);
      return read !== null && read !== 'ambiguous' && known.has(read.day);
    }),
  );
  return twoWay.length && fits.length === 1
    ? { order: fits[0]!, isFromOthers: true }
    : { order: null, isFromOthers: false };
}

/** Day and time of sampling; what cannot be told holds the row, what is unlikely is said. */
export function resolveDate(row: LabRow, catalog: LabCatalog, { order, isFromOthers }: FileDateOrder): void {
  const { receivedOn } = catalog;
  const text = row.sampledText;
  const serial = readSerial(text);
  if (serial && !isInWindow(serial.in1900, receivedOn) && isInWindow(serial.in1904, receivedOn))
    return hold(
      row,
      'date',
      `"${text}" is ${dayName(serial.in1900)}, or ${dayName(serial.in1904)} in the date system of 1904. Write the date out in the sheet.`,
    );
  const read = serial
    ? { day: serial.in1900, time: serial.time }
    : (readInstant(text, catalog) ?? readSampledDate(text, order));
  if (read === null)
    return hold(row, 'date', text ? `"${text}" is not a date.` : 'No sampling date is given.');
  if (read === 'ambiguous')
    return hold(
      row,
      'date',
      `"${text}" can be read two ways, and nothing else in the file decides. Say which part is the day.`,
    );
  if (serial) warn(row, `"${text}" is a bare number; read as the day ${dayName(read.day)}.`);
  else if (isFromOthers && readSampledDate(text, null) === 'ambiguous')
    warn(row, `"${text}" read as ${dayName(read.day)}: the day that other rows of the file give.`);
  row.sampledOn = read.day;
  row.sampledTime = read.time;
  if (read.day > receivedOn)
    hold(row, 'date', `Sampled on ${read.day}, after the file was received on ${receivedOn}.`);
  else if (!isInWindow(read.day, receivedOn))
    warn(row, `Sampled on ${read.day}, more than ${daysBeforeReceiptMax} days before the file came.`);
}
