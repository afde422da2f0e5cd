import { readFile, writeFile, mkdtemp } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import ExcelJS from 'exceljs';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openBrowserRecord, type BrowserRecord, type Visit } from '../setup/browser.ts';

const site = '/sites/varrow-hill';

/** One person of the demo, signed in for the tests of the block. */
function withPerson(role: Parameters<Visit['comeInAs']>[0]) {
  const held = {} as { visit: Visit };
  beforeAll(async () => {
    held.visit = await world.visit();
    await held.visit.comeInAs(role);
  });
  afterAll(() => held.visit.leave());
  return held;
}

let world: BrowserRecord;
beforeAll(async () => {
  world = await openBrowserRecord('demo_record', { withMail: true });
});
afterAll(() => world.close());

const rowsOf = async (sql: string) => (await world.record.admin.query(sql)).rowCount ?? 0;

describe('the plant supervisor', () => {
  const held = withPerson('supervisor');

  it('follows a volume of the ledger to the readings behind it', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/ledger/2026-02`);
    await page.getByText(/Pond P closes/).waitFor();
    await page
      .getByRole('button', { name: /Sump S3, .*where it comes from/ })
      .first()
      .click();
    const panel = page.getByRole('dialog');
    await panel.getByText('Intervals of the day').waitFor();
    await panel.getByText('What was recorded').waitFor();
    await page.keyboard.press('Escape');
  });

  it('estimates a span, refused with the readings around when it cuts an interval', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/ledger/2026-03`);
    await page.getByRole('button', { name: 'Estimate a span' }).click();
    const panel = page.getByRole('dialog');
    await panel
      .getByLabel('Meter')
      .selectOption({ label: 'S3 East sump' })
      .catch(() => panel.getByLabel('Meter').selectOption({ index: 4 }));
    await panel.getByLabel(/^From, day and time/).fill('2026-03-07 20:00');
    await panel.getByLabel(/^To, day and time/).fill('2026-03-09 08:00');
    await panel.getByLabel(/^Volume over the span/).fill('150');
    await panel.getByLabel('Method').selectOption({ index: 4 });
    await panel.getByLabel('What it rests on').fill('Four days either side');
    await panel.getByLabel('Reason').fill('Cable off');
    await panel.getByRole('button', { name: 'Save the estimate' }).click();
    await panel
      .getByRole('alert')
      .getByText(/An estimate goes from reading to reading/)
      .waitFor();
    await panel.getByLabel(/^From, day and time/).fill('2026-03-07 08:00');
    await panel.getByRole('button', { name: 'Save the estimate' }).click();
    await expect.poll(() => page.getByRole('dialog').count()).toBe(0);
    expect(
      await rowsOf(
        `select 1 from entries where basis = 'estimated' and site_day between '2026-03-07' and '2026-03-09'`,
      ),
    ).toBeGreaterThan(0);
  });
});

describe('the environmental engineer', () => {
  const held = withPerson('engineer');

  it('reads the balance in one line and opens the working of a number', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/balance/2026-02`);
    await page.locator('span').getByText('Leachate at the sump, m³').waitFor();
    await page
      .getByRole('button', { name: /working of Evapotranspiration/ })
      .first()
      .click();
    await page.getByRole('dialog').getByText('Thornthwaite 1948').first().waitFor();
    await page.keyboard.press('Escape');
  });

  it('freezes the working run and accepts it for Compare and Report', async () => {
    const { page } = held.visit;
    const before = await rowsOf(`select 1 from balance_runs where kind = 'frozen'`);
    await page.getByLabel('What it is for').fill('Review of the quarter');
    await page.getByRole('button', { name: 'Freeze the working run' }).click();
    await expect.poll(() => rowsOf(`select 1 from balance_runs where kind = 'frozen'`)).toBe(before + 1);
    await page.getByRole('button', { name: 'Accept for Compare and Report' }).first().click();
    await expect
      .poll(() => rowsOf(`select 1 from balance_runs where kind = 'frozen' and accepted_at is not null`))
      .toBe(before + 1);
  });

  it('fits the young cell, reads why not to trust it yet, and drops it', async () => {
    const { page } = held.visit;
    const before = await rowsOf('select 1 from parameter_sets');
    await page.getByRole('button', { name: 'Fit to what was pumped' }).click();
    const panel = page.getByRole('dialog');
    await panel.getByLabel('Cell').selectOption({ label: 'C3 East' });
    await panel.getByRole('button', { name: 'Fit to what was pumped' }).click();
    await panel.getByText('Why it should not be trusted yet').waitFor();
    await panel.getByText('Fewer than three years').waitFor();
    await panel.getByRole('button', { name: 'Drop it' }).click();
    await expect.poll(() => page.getByRole('dialog').count()).toBe(0);
    expect(await rowsOf('select 1 from parameter_sets')).toBe(before);
  });

  it('plans a closure ahead and sees what it saves, with its uncertainty', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/ahead`);
    await page.getByRole('button', { name: 'Add a plan beside it' }).click();
    const plan = page.locator('fieldset').filter({ hasText: 'Plan B' });
    await plan.getByRole('button', { name: 'Cover some ground' }).click();
    await plan.getByLabel('Plot').selectOption({ index: 3 });
    await plan.getByLabel('Day').fill('2026-05-01');
    await plan.getByLabel('New cover').selectOption({ label: 'final geomembrane' });
    await plan.getByRole('button', { name: 'Take the whole plot' }).click();
    await page.getByRole('button', { name: 'Look ahead' }).click();
    await page.getByText(/Plan B saves .* m³ in the middle case/).waitFor();
    await page.getByText(/8 draws in 10 fall inside/).waitFor();
  });

  it('explains a month of the young cell, and the note stands beside it', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/compare/2026-02?cell=C3`);
    await page.getByRole('button', { name: 'Jan 2026' }).click();
    const panel = page.getByRole('dialog');
    await panel.getByLabel('Cause').selectOption('waste storage filling (young cell)');
    await panel.getByLabel('Evidence').fill('Fresh lift still takes up water');
    await panel.getByRole('button', { name: 'Save the note' }).click();
    await expect.poll(() => page.getByRole('dialog').count()).toBe(0);
    await page
      .getByRole('row', { name: /Jan 2026/ })
      .getByText('waste storage filling')
      .waitFor();
  });

  it('covers part of a plot in mid-month, with the reason when it cannot be', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/site`);
    const row = page
      .getByRole('row')
      .filter({ hasText: 'working area (open)' })
      .filter({ has: page.getByRole('button', { name: 'Change cover' }) })
      .first();
    await row.getByRole('button', { name: 'Change cover' }).click();
    const panel = page.getByRole('dialog');
    await panel.getByLabel('Day the ground was covered').fill('2026-03-11');
    await panel.getByLabel('New cover').selectOption({ label: 'daily cover' });
    await panel.getByLabel(/^Area that was covered/).fill('9000000');
    await panel.getByLabel('Evidence').fill('Survey of 11 March');
    await panel.getByRole('button', { name: 'Record the cover' }).click();
    await panel
      .getByRole('alert')
      .getByText(/cannot be covered on it/)
      .waitFor();
    await panel.getByLabel(/^Area that was covered/).fill('1500');
    await panel.getByRole('button', { name: 'Record the cover' }).click();
    await expect.poll(() => page.getByRole('dialog').count()).toBe(0);
    expect(await rowsOf(`select 1 from plots where area_m2 = 1500 and from_on = '2026-03-11'`)).toBe(1);
  });

  it('uploads the real Wichita series to a new site, runs it, and sees the balance of a month of 1993', async () => {
    const { page } = held.visit;
    await held.visit.go('/new-site');
    for (const [label, value] of [
      ['Name of the site', 'Prairie Bluff'],
      ['Latitude in degrees, south negative', '37.6475'],
      ['Height above the sea, in metres', '402'],
      ['Time zone', 'America/Chicago'],
      ['Day the record begins', '1980-01-01'],
    ] as const)
      await page.getByLabel(label).fill(value);
    await page.getByRole('button', { name: 'Make the site' }).click();
    await page.waitForURL(/prairie-bluff\/site/);
    await page.getByRole('button', { name: 'Add a cell' }).click();
    const panel = page.getByRole('dialog');
    for (const [label, value] of [
      ['Code', 'C1'],
      ['Name', 'North'],
      ['Lined area, in square metres', '42000'],
      ['Day the cell opened', '1980-01-01'],
      ['Where the area comes from', 'As-built drawing'],
      ['Plot 1, name', 'Whole'],
      ['Plot 1, area in square metres', '42000'],
    ] as const)
      await panel.getByLabel(label, { exact: true }).fill(value);
    await panel.getByLabel('Plot 1, cover on the opening day').selectOption({ label: 'intermediate soil' });
    await panel.getByRole('button', { name: 'Add the cell' }).click();
    await expect.poll(() => page.getByRole('dialog').count()).toBe(0);
    await page.getByLabel('Name of the station').fill('Wichita');
    await page
      .getByLabel('Climate file')
      .setInputFiles(
        new URL('../../data/climate/wichita_ks_monthly_1980_2011.csv', import.meta.url).pathname,
      );
    await page.getByRole('button', { name: 'Read the file' }).click();
    await page.getByRole('heading', { name: 'Check the climate before it is written' }).waitFor();
    await page.getByRole('button', { name: /^Write \d+ months/ }).click();
    await page.getByText(/rows were written/).waitFor();
    await held.visit.go('/sites/prairie-bluff/balance/1993-07');
    await page.locator('span').getByText('Leachate at the sump, m³').waitFor();
    await page.getByText('not read.').waitFor();
    await page.getByRole('heading', { name: 'Lines that must close' }).waitFor();
  });

  it('tries a balance on the Method page, term by term, and nothing is stored', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/method`);
    const before = await rowsOf('select 1 from trail_entries');
    await page.getByLabel('Soil store, mm').fill('100');
    await page.getByLabel('Rain, mm, Jan').fill('12a');
    await page.getByText('Rain, mm, Jan: "a" is not part of a number.').waitFor();
    await page.getByLabel('Rain, mm, Jan').fill('90');
    await page
      .getByRole('row', { name: /^Percolation/ })
      .last()
      .waitFor();
    expect(await rowsOf('select 1 from trail_entries')).toBe(before);
  });
});

describe('the laboratory', () => {
  const held = withPerson('lab');

  it('sees only Lab, uploads a sheet, answers its question, writes and undoes', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/lab/2026-03`);
    expect(await page.getByRole('navigation', { name: 'Pages' }).getByRole('link').allTextContents()).toEqual(
      ['Lab'],
    );
    const folder = await mkdtemp(join(tmpdir(), 'sheet-'));
    const file = join(folder, 'pellam-extra.csv');
    await writeFile(
      file,
      'Client ID,Sampled,Parameter,Result,Units,RL\nOF-7,2026-03-12,TSS,14,mg/L,2\nEFF-1,2026-03-12,BOD5,<2,mg/L,2\nEFF-1,2026-03-12,Phenol,ND,mg/L,\n',
    );
    await page.getByLabel('Sheet of results').setInputFiles(file);
    await page.getByRole('button', { name: 'Read the file' }).click();
    await page.getByRole('heading', { name: 'Check before it is written' }).waitFor();
    await page.getByText('Sample point "OF-7" is not known here.').first().waitFor();
    await page.getByLabel('It is').selectOption({ label: 'EFF-1 Outfall 1' });
    await page.getByRole('button', { name: 'Use this answer' }).click();
    await page.getByRole('button', { name: 'Write 2 results' }).click();
    await page.getByText(/2 results were written, 1 row stays held/).waitFor();
    await page.getByRole('button', { name: 'Undo this import' }).click();
    await page.getByText('This upload was undone.').waitFor();
  });
});

describe('the site manager', () => {
  const held = withPerson('manager');

  it('records the call of an exceedance while its clock runs', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/limits/2026-03`);
    await page.getByText(/exceedances? (is|are) open, \d+ with a clock running/).waitFor();
    await page
      .getByRole('button', { name: /^Record it: Tell the authority/ })
      .first()
      .click();
    await page.getByRole('dialog').getByLabel('What was done').fill('Spoke to the duty officer');
    await page.getByRole('dialog').getByRole('button', { name: 'Record it' }).click();
    await page.getByText(/Spoke to the duty officer/).waitFor();
  });

  it('signs a quarter that is ready, and the workbook that is downloaded opens', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/report/2025-Q3`);
    await page.getByRole('button', { name: /^(Sign and issue|Prepare issue)/ }).click();
    const panel = page.getByRole('dialog');
    await panel.getByRole('button', { name: 'Sign and issue' }).click();
    await panel.getByRole('alert').getByText('Confirm that you have read the certification.').waitFor();
    await panel.getByLabel('I have read the certification and sign it under my own name.').check();
    await panel.getByLabel(/^Why it is signed/).fill('Open lines are explained');
    await panel.getByRole('button', { name: 'Sign and issue' }).click();
    await page
      .getByText(/Issue 0 was signed on 18 March 2026/)
      .first()
      .waitFor();
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: /^Download varrow-hill-2025-q3/ }).click(),
    ]);
    const workbook = new ExcelJS.Workbook();
    await workbook.xlsx.load((await readFile(await download.path())) as never);
    expect(workbook.worksheets[0]!.name).toBe('About');
  });
});

describe('the auditor', () => {
  const held = withPerson('auditor');

  it('reads the trail and the chain, and finds nothing to change anywhere', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/trail`);
    await page.getByText('The chain holds').waitFor();
    for (const path of [
      'month/2026-02',
      'ledger/2026-02',
      'limits/2026-03',
      'report/2025-Q4',
      'site',
      'lab/2026-03',
      'balance/2026-02',
    ]) {
      await held.visit.go(`${site}/${path}`);
      const names = await page.locator('main').getByRole('button').allTextContents();
      expect(
        names.filter((name) =>
          /^(Save|Add|Close|Reopen|Sign|Write|Record|Confirm|Make|Freeze|Estimate|Invite|End|Read the file|Change)/.test(
            name,
          ),
        ),
        path,
      ).toEqual([]);
    }
  });
});

describe('the administrator', () => {
  const held = withPerson('admin');

  it('invites a person, who chooses a password by the link of the mail and comes in', async () => {
    const { page } = held.visit;
    await held.visit.go(`${site}/site`);
    await page.getByRole('button', { name: 'Invite a person' }).click();
    const panel = page.getByRole('dialog');
    await panel.getByLabel('Name').fill('Nia Porter');
    await panel.getByLabel('E-mail address').fill('nia.porter@varrowhill.example');
    await panel.getByLabel('Role at this site').selectOption({ label: 'operator' });
    await panel.getByRole('button', { name: 'Send the invitation' }).click();
    await page.getByRole('cell', { name: 'nia.porter@varrowhill.example' }).waitFor();
    const guest = await world.visit();
    await guest.page.goto(`${world.base}/caught-mail`);
    const link = guest.page.getByRole('link', { name: /secret=/ });
    await link.first().waitFor({ timeout: 30_000 });
    const secret = new URL((await link.first().getAttribute('href'))!);
    await guest.page.goto(`${world.base}/password${secret.search}`);
    await guest.page.getByLabel('New password').fill('a few plain words');
    await guest.page.getByRole('button', { name: 'Save and sign in' }).click();
    await guest.page.waitForURL(/\/round\//);
    await guest.leave();
  });
});
