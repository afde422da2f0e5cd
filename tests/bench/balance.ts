import { median, timesMs, type Figure } from './measure.ts';
import type { World } from './world.ts';

const years = 40;

/** A site of four plots with forty years of daily climate, made through the API but for its days. */
async function makeLongSite(
  { base, owner }: World,
  cookie: string,
): Promise<{ siteId: string; stationId: string }> {
  const post = async (path: string, body: object) => {
    const answer = await fetch(`${base}/api/v1${path}`, {
      method: 'POST',
      headers: { cookie, 'content-type': 'application/json', 'idempotency-key': crypto.randomUUID() },
      body: JSON.stringify(body),
    });
    if (!answer.ok) throw new Error(`${path} answered ${answer.status}: ${await answer.text()}`);
  };
  const siteId = crypto.randomUUID();
  await post('/sites', {
    id: siteId,
    name: 'Long record',
    latitudeDeg: '50',
    elevationM: '100',
    timeZone: 'Europe/London',
    dayBoundary: '00:00',
    openedOn: '1986-01-01',
    displayUnits: 'metric',
  });
  const cover = await owner.query<{ id: string }>(
    `select id from cover_types where site_id = $1 and kind = 'intermediate-soil'`,
    [siteId],
  );
  await post(`/sites/${siteId}/cells`, {
    id: crypto.randomUUID(),
    code: 'C1',
    name: 'One',
    linedAreaM2: '40000',
    openedOn: '1986-01-01',
    evidence: 'bench',
    areaReason: '',
    plots: ['A', 'B', 'C', 'D'].map((name) => ({
      id: crypto.randomUUID(),
      name,
      areaM2: '10000',
      coverTypeId: cover.rows[0]!.id,
    })),
  });
  const station = await owner.query<{ id: string }>(`select id from stations where site_id = $1`, [siteId]);
  const stationId = station.rows[0]!.id;
  await owner.query(
    `insert into climate_days (organisation_id, id, recorded_by_id, station_id, site_day, precipitation_mm, t_min_c, t_max_c, t_mean_c)
     select s.organisation_id, gen_random_uuid(), (select person_id from memberships limit 1), s.id, d::date,
       greatest(0, round((6 * sin(extract(doy from d)::numeric * 1.7) - 1)::numeric, 1)), 5, 15, 10 + round((9 * sin((extract(doy from d) - 110)::numeric / 58))::numeric, 1)
     from stations s, generate_series('1986-01-01'::date, '2025-12-31'::date, '1 day') d where s.id = $1`,
    [stationId],
  );
  return { siteId, stationId };
}

/** A month of a balance over forty years of days, beside reading its climate rows alone. */
export async function benchBalance(world: World): Promise<Figure[]> {
  const cookie = await world.cookieOf('engineer');
  const { siteId, stationId } = await makeLongSite(world, cookie);
  const get = async () => {
    const answer = await fetch(`${world.base}/api/v1/sites/${siteId}/balance/2025-10`, {
      headers: { cookie },
    });
    if (!answer.ok) throw new Error(`Balance answered ${answer.status}: ${await answer.text()}`);
    await answer.text();
  };
  const served = await timesMs(7, get);
  const read = await timesMs(7, () =>
    world.owner.query(
      'select site_day, precipitation_mm, t_min_c, t_max_c, t_mean_c from climate_days where station_id = $1 order by site_day',
      [stationId],
    ),
  );
  return [
    {
      what: `a month of a balance over ${years} years of days, 4 plots`,
      value: median(served),
      unit: 'ms',
      bare: 'one SELECT of its climate rows',
      bareValue: median(read),
    },
  ];
}
