import { dayNameShort, firstDay, lastDay, monthDays, monthOfDay } from '#shared/calendar/day.ts';
import { monthName, type Month } from '#shared/calendar/month.ts';
import { notReadReasonNames } from '#shared/schemas/readings.ts';
import type { DayState, GridLine, MonthLine, MonthView } from '#shared/views/month-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { listStations, listLiveDays } from '../climate/climate-repository.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { closingObstacles } from '../closings/closing-service.ts';
import { readCompare } from '../compare/compare-service.ts';
import { readLab } from '../lab/lab-view.ts';
import { listEntries, listMonthActs, listPendingChanges } from '../ledger/entry-repository.ts';
import { judgeMonths } from '../limits/verdict-service.ts';
import * as readingRepository from '../readings/reading-repository.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';

async function meterLines(
  tx: Transaction,
  record: SiteRecord,
  month: Month,
  today: string,
): Promise<{ grid: GridLine[]; lines: MonthLine[] }> {
  const meters = record.meters;
  if (!meters.length) return { grid: [], lines: [] };
  const readings = await readingRepository.listReadingsOfDays(
    tx,
    meters.map((meter) => meter.id),
    firstDay(month),
    lastDay(month),
  );
  const entries = await listEntries(tx, record.site.id, firstDay(month), lastDay(month));
  const notRead = await readingRepository.listNotRead(tx, record.site.id, firstDay(month), lastDay(month));
  const lines: MonthLine[] = [];
  const grid = record.roundPoints
    .filter((point) => point.kind === 'meter')
    .map((point): GridLine => {
      const meter = meters.find((one) => one.id === point.subjectId)!;
      const days = monthDays(month).map((day): DayState => {
        if (point.everyDays > 1 && !readings.some((one) => one.meterId === meter.id && one.siteDay === day))
          return 'none';
        const own = readings.filter((one) => one.meterId === meter.id && one.siteDay === day);
        if (own.some((one) => one.answer === 'held')) return 'held';
        const basis = entries.find(
          (one) =>
            one.meterId === meter.id &&
            one.siteDay === day &&
            one.reversesId === null &&
            !entries.some((other) => other.reversesId === one.id),
        )?.basis;
        if (basis === 'estimated') return 'estimated';
        if (basis === 'apportioned' && point.everyDays === 1) return 'apportioned';
        if (own.length) return 'read';
        if (notRead.some((one) => one.roundPointId === point.id && one.siteDay === day)) return 'not-read';
        return day >= today || day < meter.installedOn ? 'none' : 'missing';
      });
      const name = `${meter.code} ${meter.name}`;
      const missing = monthDays(month).filter((_, index) => days[index] === 'missing');
      if (missing.length)
        lines.push({
          subject: `${name}, ${listDays(missing)}.`,
          sentence: 'No reading and no reason given.',
          link: `round/${missing[0]}`,
          linkText: 'Enter or give the reason',
        });
      const held = monthDays(month).filter((_, index) => days[index] === 'held');
      if (held.length)
        lines.push({
          subject: `${name}, ${listDays(held)}.`,
          sentence: 'A reading is held until somebody says what happened.',
          link: `round/${held[0]}`,
          linkText: 'Answer',
        });
      const rateMax = Number(meter.rateM3PerDayMax);
      for (const day of monthDays(month)) {
        const volumeM3 = entries
          .filter((one) => one.meterId === meter.id && one.siteDay === day)
          .reduce((sum, one) => sum + Number(one.volumeM3), 0);
        if (volumeM3 <= rateMax) continue;
        lines.push({
          subject: `${name}, ${dayNameShort(day)}.`,
          sentence: `${Math.round(volumeM3)} m³ is more than a plausible day of ${rateMax} m³.`,
          link: `round/${day}`,
          linkText: 'Look at the reading',
        });
      }
      const spread = monthDays(month).filter((_, index) => days[index] === 'apportioned');
      if (spread.length)
        lines.push({
          subject: `${name}, ${listDays(spread)}.`,
          sentence: 'Measured over several days, spread evenly.',
          link: `ledger/${month}`,
          linkText: 'See the split',
        });
      for (const one of notRead.filter((row) => row.roundPointId === point.id)) {
        lines.push({
          subject: `${name}, ${dayNameShort(one.siteDay)}.`,
          sentence: `Not read: ${notReadReasonNames[one.reasonCode as keyof typeof notReadReasonNames].toLowerCase()}.${one.note ? ` ${one.note}` : ''}`,
          link: null,
          linkText: null,
        });
      }
      return { name, series: 'pumped', days };
    });
  return { grid, lines };
}

const listDays = (days: string[]) =>
  days.length > 3 ? `${days.length} days from ${dayNameShort(days[0]!)}` : days.map(dayNameShort).join(', ');

async function climateGrid(
  tx: Transaction,
  siteId: string,
  month: Month,
  today: string,
): Promise<GridLine[]> {
  const stations = await listStations(tx, siteId);
  if (!stations.length) return [];
  const rows = await listLiveDays(
    tx,
    stations.map((station) => station.id),
    firstDay(month),
    lastDay(month),
  );
  // A monthly record has no days of its own: the month is known, its days are not.
  const whole = (await listSiteClimate(tx, siteId)).find((one) => one.month === month);
  const isMonthly = Boolean(whole?.isComplete) && !rows.length;
  const line = (name: string, has: (row: (typeof rows)[number]) => boolean): GridLine => ({
    name,
    series: 'rain',
    days: monthDays(month).map((day) =>
      isMonthly
        ? 'apportioned'
        : rows.some((row) => row.siteDay === day && has(row))
          ? rows.some((row) => row.siteDay === day && row.kind === 'accumulated')
            ? 'apportioned'
            : 'read'
          : day >= today
            ? 'none'
            : 'missing',
    ),
  });
  return [
    line('Rain', (row) => row.precipitationMm !== null),
    line('Temperature', (row) => row.tMeanC !== null || row.tMinC !== null),
  ];
}

/** The month at a glance: what is missing, what is wrong or odd, what is next, and the leachate of each cell. */
export async function readMonth(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  month: Month,
): Promise<MonthView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const today = (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
  const climate = await climateGrid(tx, siteId, month, today);
  const climateMissing = climate.flatMap((line): MonthLine[] => {
    const days = monthDays(month).filter((_, index) => line.days[index] === 'missing');
    return days.length
      ? [
          {
            subject: `${line.name}, ${listDays(days)}.`,
            sentence: 'No record of the day.',
            link: 'site',
            linkText: 'Climate',
          },
        ]
      : [];
  });
  const meters = await meterLines(tx, record, month, today);
  const lab = await readLab(tx, context, month);
  const late = lab.plan.filter(
    (item) => item.receivedCount < item.expectedCount && month < monthOfDay(today),
  );
  const act = (await listMonthActs(tx, siteId)).get(month) ?? null;
  const odd: MonthLine[] = [];
  for (const judged of await judgeMonths(tx, siteId, [month])) {
    const { verdict } = judged;
    if (verdict.word === 'exceed')
      odd.push({
        subject: `${judged.analyteName} exceeds its ${judged.limit.statistic.replace('-', ' ')}.`,
        sentence: verdict.sentence,
        link: `limits/${month}`,
        linkText: 'Limits',
      });
    else if (verdict.note)
      odd.push({
        subject: `${judged.analyteName}, ${judged.limit.statistic.replace('-', ' ')}: ${verdict.word} by the rule only.`,
        sentence: verdict.note,
        link: `limits/${month}`,
        linkText: 'Limits',
      });
  }
  const cells = [];
  for (const cell of record.cells) {
    const compared = await readCompare(tx, context, deps, cell.code, month, 12).catch(() => null);
    const row = compared?.rows.find((one) => one.month === month) ?? null;
    cells.push({
      code: cell.code,
      name: cell.name,
      cover: row?.covers.map((cover) => cover.name).join(', ') ?? '',
      areaM2: row?.areaM2 ?? null,
      predictedM3: row?.predictedM3 ?? null,
      measuredM3: row?.measuredM3 ?? null,
      differenceM3: row?.differenceM3 ?? null,
      percent: row?.isPercentMuted ? null : (row?.percent ?? null),
      isAllocated: (row?.allocatedPercent ?? 0) > 0,
      estimatedPercent: row?.estimatedPercent ?? 0,
    });
    if (row && row.isInside === false && row.tolerance) {
      const more = row.differenceM3! > 0;
      odd.push({
        subject: `${cell.code} pumped ${Math.abs(row.differenceM3!).toFixed(0)} m³ ${more ? 'more' : 'less'} than predicted`,
        sentence: `(${more ? '+' : '−'}${row.percent === null ? '' : `${Math.abs(row.percent).toFixed(1)} %, `}tolerance ±${row.tolerance.valueM3.toFixed(0)} m³).${row.note ? ` ${row.note.state}: ${row.note.cause}.` : ''}`,
        link: `compare/${month}?cell=${cell.code}`,
        linkText: 'Compare',
      });
    }
  }
  const pending = (await listPendingChanges(tx, siteId)).filter((one) => one.month === month);
  for (const one of pending)
    odd.push({
      subject: 'After the closing.',
      sentence: one.sentence,
      link: `trail?subject=${one.factId}`,
      linkText: 'Trail',
    });
  const obstacles = act?.act === 'close' ? [] : await closingObstacles(tx, record, month, today);
  return {
    month,
    title: monthName(month),
    today,
    grid: [...climate, ...meters.grid],
    missing: [
      ...climateMissing,
      ...meters.lines,
      ...late.map((item): MonthLine => ({
        subject: `${item.analyteName}, ${item.pointCode}.`,
        sentence: `${item.receivedCount} of ${item.expectedCount} results are in.`,
        link: `lab/${month}`,
        linkText: 'Lab',
      })),
    ],
    odd,
    cells,
    obstacles,
    act: act && { act: act.act, at: act.recordedAt, reason: act.reason },
    lateCount: late.length,
  };
}
