import { readFileSync } from 'node:fs';
import { hostname } from 'node:os';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { readLabSheets } from '#shared/lab/read-lab-sheet.ts';
import { readSheet } from '#server/spreadsheets/read-sheet.ts';
import type { LabView } from '#shared/views/lab-view.ts';
import { goodWorkbook, hostileFiles } from '../factories/hostile-files.ts';
import { openTestRecord, siteIdOf, type Agent, type TestRecord } from '../setup/test-record.ts';

describe('hostile spreadsheets cannot take the server down', () => {
  let record: TestRecord;
  let engineer: Agent;
  let siteId: string;
  let laboratoryId: string;
  beforeAll(async () => {
    record = await openTestRecord('demo_record');
    engineer = await record.as('engineer');
    siteId = await siteIdOf(engineer);
    laboratoryId = ((await engineer.get(`/api/v1/sites/${siteId}/lab/2026-03`)).body as LabView)
      .laboratories[0]!.id;
  });
  afterAll(() => record.close());

  const upload = (path: string, bytes: Buffer, name: string) =>
    engineer
      .post(`/api/v1/sites/${siteId}${path}`)
      .set('Idempotency-Key', crypto.randomUUID())
      .field('id', crypto.randomUUID())
      .field('laboratoryId', laboratoryId)
      .field('stationName', 'Any')
      .attach('file', bytes, name);
  const rowCounts = async () =>
    (
      await record.admin.query(
        'select (select count(*) from results) as results, (select count(*) from climate_days) as days, (select count(*) from import_rows) as staged',
      )
    ).rows[0];

  it.each(Object.entries(hostileFiles))('%s', async (_name, file) => {
    const bytes = await file.bytes();
    const before = await rowCounts();
    const answer = await upload('/lab-imports', Buffer.from(bytes), file.name);
    if (file.says === null) {
      expect([201, 422]).toContain(answer.status);
    } else {
      expect(answer.status).toBe(422);
      expect(answer.type).toBe('application/problem+json');
      expect(answer.body.detail).toMatch(file.says);
      expect(await rowCounts()).toEqual(before);
    }
    expect(JSON.stringify(answer.body)).not.toMatch(/node_modules|\.ts:|Error:|\bat \w+ \(/);
    expect(JSON.stringify(answer.body)).not.toContain(
      hostname() === '' ? 'nothing' : readFileSync('/etc/hostname', 'utf8').trim() || 'nothing',
    );
    await engineer.get('/api/v1/health').expect(200);
  });

  it('the same files at the climate door', async () => {
    for (const [name, file] of Object.entries(hostileFiles)) {
      const answer = await upload('/climate-imports', Buffer.from(await file.bytes()), file.name);
      expect(answer.status, name).toBe(422);
    }
  });

  it('H7: a byte flipped anywhere gives an error or the same results, never other ones', async () => {
    const whole = await goodWorkbook();
    const resultsOf = async (bytes: Buffer) =>
      readLabSheets((await readSheet({ name: 'h7.xlsx', bytes })).sheets).rows.map((row) => [
        row.pointText,
        row.analyteText,
        row.resultText,
        row.unitText,
      ]);
    const wanted = await resultsOf(whole);
    expect(wanted).toHaveLength(2);
    let seed = 20_260_301;
    for (let index = 0; index < 24; index += 1) {
      seed = (seed * 1_103_515_245 + 12_345) % 2_147_483_648;
      const flipped = Buffer.from(whole);
      const at = seed % whole.length;
      flipped[at] = flipped[at]! ^ (1 << (seed % 8));
      const read = await resultsOf(flipped).catch((error: Error) => error);
      if (!(read instanceof Error)) for (const row of read) expect(wanted, `byte ${at}`).toContainEqual(row);
    }
  }, 120_000);

  it('60 000 rows, a PDF by another name and a macro workbook each get a plain sentence', async () => {
    const long = Buffer.from(
      `Client ID,Sampled,Parameter,Result,Units\n${'EFF-1,2026-03-16,TSS,14,mg/L\n'.repeat(60_000)}`,
    );
    expect((await upload('/lab-imports', long, 'long.csv').expect(422)).body.detail).toMatch(/rows/);
    expect(
      (await upload('/lab-imports', Buffer.from('%PDF-1.7 …'), 'report.csv').expect(422)).body.detail,
    ).toContain('PDF');
    expect((await upload('/lab-imports', Buffer.from('PK'), 'book.xlsm').expect(422)).body.detail).toContain(
      'macros',
    );
    const tooBig = await upload('/lab-imports', Buffer.alloc(11 * 1024 * 1024, 65), 'big.csv');
    expect([tooBig.status, tooBig.type]).toEqual([413, 'application/problem+json']);
  });
});
