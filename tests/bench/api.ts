import type { AddressInfo } from 'node:net';
import autocannon from 'autocannon';
import express from 'express';
import { median, quantile, type Figure } from './measure.ts';
import type { World } from './world.ts';

interface Load {
  url: string;
  clients: number;
  request: (index: number) => {
    method: 'GET' | 'POST';
    path: string;
    headers: Record<string, string>;
    body?: string;
  };
}

/** Latencies of one load, ms: median and 95th percentile over the medians of five runs. */
async function latencies({ url, clients, request }: Load): Promise<{ p50: number; p95: number }> {
  const runs: { p50: number; p95: number }[] = [];
  let index = 0;
  for (let run = 0; run < 6; run += 1) {
    const times: number[] = [];
    const instance = autocannon({
      url,
      connections: clients,
      amount: clients === 1 ? 60 : 320,
      requests: [{ setupRequest: (plain) => ({ ...plain, ...request((index += 1)) }) }],
      setupClient: (client) => {
        client.on('response', (status, _bytes, time) => {
          if (status >= 400) throw new Error(`${url} answered ${status}.`);
          times.push(time);
        });
      },
    });
    await instance;
    if (run > 0) runs.push({ p50: quantile(times, 0.5), p95: quantile(times, 0.95) });
  }
  return { p50: median(runs.map((one) => one.p50)), p95: median(runs.map((one) => one.p95)) };
}

const meterCount = 100;

/** Meters beside the demo's own, so that no register collects more readings a day than a site would have. */
async function addMeters({ owner }: World): Promise<string[]> {
  const rows = await owner.query<{
    id: string;
  }>(`insert into meters (organisation_id, id, site_id, code, name, from_place_id, to_place_id, digits, decimals, unit, multiplier, rate_m3_per_day_max, installed_on)
    select organisation_id, gen_random_uuid(), site_id, 'B' || n, 'Bench ' || n, from_place_id, to_place_id, 7, 0, 'm3', 1, 400, '2026-03-01' from meters, generate_series(1, ${meterCount}) n where code = 'O1' returning id`);
  return rows.rows.map((row) => row.id);
}

/** A bare Express with one indexed SELECT and one INSERT on the same PostgreSQL. */
async function openBare({ owner, siteId }: World) {
  await owner.query(
    'create table bare_readings (id uuid primary key, meter_id uuid not null, observed_at timestamptz not null, register_value numeric not null)',
  );
  const app = express();
  app.use(express.json());
  app.get('/month', async (_request, response) => {
    response.json(
      (
        await owner.query(
          `select * from entries where site_id = $1 and site_day between '2026-02-01' and '2026-02-28'`,
          [siteId],
        )
      ).rows,
    );
  });
  app.post('/reading', async (request, response) => {
    const { id, meterId, observedAt, value } = request.body as Record<string, string>;
    await owner.query('insert into bare_readings values ($1, $2, $3, $4)', [id, meterId, observedAt, value]);
    response.status(201).json({ id });
  });
  const server = app.listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  return { url: `http://127.0.0.1:${(server.address() as AddressInfo).port}`, close: () => server.close() };
}

/** The month page and one reading saved, with 1 and 16 clients, beside the bare routes. */
export async function benchApi(world: World): Promise<Figure[]> {
  const { base, siteId } = world;
  const cookie = await world.cookieOf('engineer');
  const bare = await openBare(world);
  const meterIds = await addMeters(world);
  const meterId = meterIds[0]!;
  const from = Date.parse('2026-03-18T06:00:00Z');
  const headers = { cookie, 'content-type': 'application/json' };
  const month = () => ({ method: 'GET' as const, path: `/api/v1/sites/${siteId}/months/2026-02`, headers });
  const reading = (index: number) => {
    const id = crypto.randomUUID();
    return {
      method: 'POST' as const,
      path: `/api/v1/sites/${siteId}/readings`,
      headers: { ...headers, 'idempotency-key': id },
      body: JSON.stringify({
        id,
        meterId: meterIds[index % meterCount],
        registerText: '100',
        answer: 'confirmed',
        observedAt: new Date(from + Math.floor(index / meterCount) * 60_000).toISOString(),
      }),
    };
  };
  const bareReading = () => ({
    method: 'POST' as const,
    path: '/reading',
    headers: { 'content-type': 'application/json' },
    body: JSON.stringify({
      id: crypto.randomUUID(),
      meterId,
      observedAt: new Date(from).toISOString(),
      value: '100',
    }),
  });
  const figures: Figure[] = [];
  for (const clients of [1, 16]) {
    const words = clients === 1 ? '1 client' : `${clients} clients`;
    const [own, plain] = [
      await latencies({ url: base, clients, request: month }),
      await latencies({
        url: bare.url,
        clients,
        request: () => ({ method: 'GET', path: '/month', headers: {} }),
      }),
    ];
    for (const key of ['p50', 'p95'] as const)
      figures.push({
        what: `month page of the demo, ${key}, ${words}`,
        value: own[key],
        unit: 'ms',
        bare: 'Express, one indexed SELECT',
        bareValue: plain[key],
      });
    const [save, insert] = [
      await latencies({ url: base, clients, request: reading }),
      await latencies({ url: bare.url, clients, request: bareReading }),
    ];
    for (const key of ['p50', 'p95'] as const)
      figures.push({
        what: `reading saved, ${key}, ${words}`,
        value: save[key],
        unit: 'ms',
        bare: 'Express, one INSERT',
        bareValue: insert[key],
      });
  }
  bare.close();
  return figures;
}
