import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { openBrowserRecord, phone, type BrowserRecord, type Visit } from '../setup/browser.ts';

describe('the operator, on a phone', () => {
  let world: BrowserRecord;
  let visit: Visit;
  beforeAll(async () => {
    world = await openBrowserRecord('demo_record');
    visit = await world.visit(phone);
    await visit.comeInAs('operator');
  });
  afterAll(async () => {
    await visit.leave();
    await world.close();
  });

  const point = (name: string) => visit.page.locator('ol > li').filter({ hasText: name }).first();
  const readingCount = async () =>
    Number((await world.record.admin.query<{ n: string }>('select count(*) as n from readings')).rows[0]!.n);
  const lastOf = async (code: string) =>
    (
      await world.record.admin.query<{ register_value: string }>(
        'select r.register_value from readings r join meters m on m.id = r.meter_id where m.code = $1 order by r.observed_at desc limit 1',
        [code],
      )
    ).rows[0]!.register_value;

  it('comes in to today’s round, in walking order, with the last shift’s words first', async () => {
    expect(visit.page.url()).toContain('/round/2026-03-18');
    await expect
      .poll(() => visit.page.getByRole('heading', { level: 1 }).textContent())
      .toContain('Wednesday 18 March 2026');
    await visit.page.getByText('From the last shift').waitFor();
  });

  it('types a register, sees the volume it makes, and saves it', async () => {
    const { page } = visit;
    await point('S3 East sump').getByRole('button').first().click();
    const value = String(Number(await lastOf('S3')) + 11);
    await page.getByLabel(/^Register/).fill(value);
    await page.locator('[aria-live="polite"]').filter({ hasText: 'm³' }).first().waitFor();
    const before = await readingCount();
    await page.getByRole('button', { name: 'Save S3' }).click();
    await expect.poll(readingCount).toBe(before + 1);
    await point('S3 East sump').getByText(value).first().waitFor();
    // L3 is read every seven days and not due, so the next point that is open is the one after it.
    await point('L3 leak detection').getByText('due 23 Mar').waitFor();
    await page.getByRole('button', { name: 'Save P1' }).waitFor();
  });

  it('a value below the last one asks, keeps what was typed, and holds nothing up', async () => {
    const { page } = visit;
    await page.getByLabel(/^Register/).fill('12');
    await page.getByRole('button', { name: 'Save P1' }).click();
    await page.getByRole('group', { name: 'A question about P1 plant inflow' }).waitFor();
    await page.getByRole('button', { name: 'It was read wrong: type it again' }).waitFor();
    await expect
      .poll(
        async () =>
          (
            await world.record.admin.query(
              `select 1 from readings where typed_text = '12' and answer = 'held'`,
            )
          ).rowCount,
      )
      .toBe(1);
  });

  it('says why a point was not read, without a number', async () => {
    const { page } = visit;
    await visit.go('/sites/varrow-hill/round/2026-03-18');
    await point('O1 outfall').getByRole('button').first().click();
    await page.getByRole('button', { name: 'I could not read it' }).click();
    await page.getByRole('button', { name: 'Locked out' }).click();
    await page.getByRole('button', { name: 'Save “not read”' }).click();
    await point('O1 outfall').getByText('Not read: locked out').waitFor();
  });

  it('without a signal an entry is safe on the phone, and is sent once when there is one', async () => {
    const { page } = visit;
    await visit.go('/sites/varrow-hill/round/2026-03-18');
    await point('H1 North and Middle').getByRole('button').first().click();
    await page.getByLabel(/^Register/).fill(String(Number(await lastOf('H1')) + 6));
    const before = await readingCount();
    await visit.context.setOffline(true);
    await page.getByRole('button', { name: 'Save H1' }).click();
    await page.getByText('Saved on this phone').first().waitFor();
    expect(await readingCount()).toBe(before);
    // The page sends by itself as soon as the browser says that it is on line again.
    await visit.context.setOffline(false);
    await expect.poll(readingCount).toBe(before + 1);
    await expect.poll(() => page.getByText('saved on this phone, not sent yet').count()).toBe(0);
  });

  it('an entry kept on the phone outlives the page', async () => {
    const { page } = visit;
    await visit.go('/sites/varrow-hill/round/2026-03-18');
    await point('Pond P').getByRole('button').first().click();
    await page.getByLabel(/level/i).first().fill('1.20');
    await visit.context.setOffline(true);
    await page.getByRole('button', { name: /^Save/ }).first().click();
    await page.getByText('Saved on this phone').first().waitFor();
    await visit.context.setOffline(false);
    await visit.go('/sites/varrow-hill/round/2026-03-18');
    await expect
      .poll(
        async () =>
          (
            await world.record.admin.query(
              `select 1 from levels where typed_text = '1.20' and site_day = '2026-03-18'`,
            )
          ).rowCount,
      )
      .toBe(1);
  });

  it('enters a load and hands the round over', async () => {
    const { page } = visit;
    await visit.go('/sites/varrow-hill/round/2026-03-18');
    await page.getByRole('button', { name: 'Add a load' }).click();
    await page.getByLabel('Ticket number').fill('009001');
    await page.getByLabel('Hauler').fill('Dunmere Haulage');
    await page.getByLabel(/Nominal volume/).fill('20.8');
    await page.getByRole('button', { name: 'Save the load' }).click();
    await page.getByText('009001').waitFor();
    await page.getByLabel(/What the next shift must know/).fill('Gate code changed');
    await page.getByRole('button', { name: 'Hand over the round' }).click();
    await page.getByText(/Sent \d/).waitFor();
  });

  it('every target of the round is at least 48 px tall or stands clear', async () => {
    await point('S3 East sump').getByRole('button').first().click();
    const small = await visit.page.locator('main button, main input, main select').evaluateAll((elements) =>
      elements
        .filter((element) => {
          const { height } = element.getBoundingClientRect();
          return height > 0 && height < 48;
        })
        .map((element) => element.textContent),
    );
    expect(small).toEqual([]);
  });

  it('sees no page that is not the operator’s', async () => {
    await visit.page.getByRole('button', { name: 'Pages' }).click();
    const names = await visit.page
      .getByRole('navigation', { name: 'Pages' })
      .getByRole('link')
      .allTextContents();
    expect(names).not.toContain('Trail');
    expect(names).toContain('Round');
  });
});
