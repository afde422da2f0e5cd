import { addDays, daysBetween, firstDay, lastDay, monthOfDay } from '#shared/calendar/day.ts';
import {
  addMonths,
  daysInMonth,
  monthOf,
  monthParts,
  monthRange,
  type Month,
} from '#shared/calendar/month.ts';
import { sql } from 'drizzle-orm';
import type { StripView, TubeState } from '#shared/views/month-view.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { listLiveResults, listPlan, listSamplePoints } from '../lab/lab-repository.ts';
import { listMonthActs } from '../ledger/entry-repository.ts';
import { readSite, siteDaysOf, siteOf, type SiteRecord } from '../sites/site-service.ts';

/** First month of the site's reporting year that holds a month. */
export function reportingYearStart(month: Month, startMonth: number): Month {
  const { year, monthOfYear } = monthParts(month);
  return monthOf(monthOfYear >= startMonth ? year : year - 1, startMonth);
}

/** Days of a month on which a reading was taken, per meter and store: what the meters tube counts. */
async function readDayCounts(
  tx: Transaction,
  record: SiteRecord,
  first: string,
  last: string,
): Promise<Map<string, number>> {
  const found = await tx.execute<{ subject_id: string; month: string; day_count: string }>(sql`
    select r.meter_id as subject_id, to_char(r.site_day, 'YYYY-MM') as month, count(distinct r.site_day)::text as day_count from readings r
      join meters m on m.organisation_id = r.organisation_id and m.id = r.meter_id
      where m.site_id = ${record.site.id} and r.site_day between ${first} and ${last} and r.is_void = 'no' group by 1, 2
    union all
    select l.store_id, to_char(l.site_day, 'YYYY-MM'), count(distinct l.site_day)::text from levels l
      join stores s on s.organisation_id = l.organisation_id and s.id = l.store_id
      where s.site_id = ${record.site.id} and l.site_day between ${first} and ${last} and l.is_void = 'no' group by 1, 2`);
  return new Map(found.rows.map((row) => [`${row.subject_id} ${row.month}`, Number(row.day_count)]));
}

/** The share of expected records that has arrived, per month of a reporting year. */
export async function readStrip(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  month: Month,
): Promise<StripView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const today = (await siteDaysOf(tx, siteId)).dayOf(deps.now().getTime());
  const yearStart = reportingYearStart(month, record.site.reportingYearStartMonth);
  const months = monthRange(yearStart, addMonths(yearStart, 11));
  const [first, last] = [firstDay(months[0]!), lastDay(months.at(-1)!)];
  const climate = new Map((await listSiteClimate(tx, siteId)).map((row) => [row.month, row]));
  const counts = await readDayCounts(tx, record, first, last);
  const points = await listSamplePoints(tx, siteId);
  const plan = (await listPlan(tx)).filter((item) => points.some((point) => point.id === item.samplePointId));
  const results = await listLiveResults(tx, siteId, first, last);
  const acts = await listMonthActs(tx, siteId);
  const currentMonth = monthOfDay(today);
  return {
    yearStart,
    today,
    months: months.map((one) => {
      const daysSoFar =
        one > currentMonth
          ? 0
          : one === currentMonth
            ? Math.max(0, daysBetween(firstDay(one), today))
            : daysInMonth(one);
      const row = climate.get(one);
      return {
        month: one,
        isFuture: one > currentMonth,
        isRunning: one === currentMonth,
        lid: acts.get(one)?.act === 'close' ? 'closed' : acts.get(one)?.act === 'reopen' ? 'ajar' : 'none',
        climate: {
          expectedCount: daysSoFar,
          receivedCount: Math.min(daysSoFar, Math.min(row?.rainDayCount ?? 0, row?.temperatureDayCount ?? 0)),
        },
        meters: metersTube(record, one, daysSoFar, counts),
        lab: labTube(plan, results, one, daysSoFar),
      };
    }),
  };
}

/** Points expected every so many days since they were installed, against days with a reading. */
function metersTube(
  record: SiteRecord,
  month: Month,
  daysSoFar: number,
  counts: Map<string, number>,
): TubeState {
  let expectedCount = 0;
  let receivedCount = 0;
  for (const point of record.roundPoints.filter((one) => one.kind === 'meter' || one.kind === 'level')) {
    const meter = record.meters.find((one) => one.id === point.subjectId);
    const from = meter && meter.installedOn > firstDay(month) ? meter.installedOn : firstDay(month);
    const days = Math.max(0, Math.min(daysSoFar, daysBetween(from, addDays(firstDay(month), daysSoFar))));
    const expected = Math.floor(days / point.everyDays);
    expectedCount += expected;
    receivedCount += Math.min(expected, counts.get(`${point.subjectId} ${month}`) ?? 0);
  }
  return { expectedCount, receivedCount };
}

function labTube(
  plan: Awaited<ReturnType<typeof listPlan>>,
  results: Awaited<ReturnType<typeof listLiveResults>>,
  month: Month,
  daysSoFar: number,
): TubeState {
  const live = plan.filter(
    (item) => item.fromOn <= lastDay(month) && (item.toOn === null || item.toOn > firstDay(month)),
  );
  let expectedCount = 0;
  let receivedCount = 0;
  for (const item of live) {
    const expected = daysSoFar === 0 ? 0 : item.samplesPerMonth;
    const got = results.filter(
      (row) =>
        row.samplePointId === item.samplePointId &&
        row.analyteId === item.analyteId &&
        row.fraction === item.fraction &&
        row.missingReason === null &&
        row.siteDay.startsWith(month),
    ).length;
    expectedCount += expected;
    receivedCount += Math.min(expected, got);
  }
  return { expectedCount, receivedCount };
}
