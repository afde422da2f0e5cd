import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import type { Role } from '#shared/permissions.ts';
import {
  axeFindings,
  desktop,
  openBrowserRecord,
  phone,
  sidewaysPx,
  type BrowserRecord,
  type Visit,
} from '../setup/browser.ts';

const site = '/sites/varrow-hill';
const pages: Record<string, [Role, string]> = {
  month: ['engineer', `${site}/month/2026-02`],
  round: ['operator', `${site}/round/2026-03-18`],
  balance: ['engineer', `${site}/balance/2026-02`],
  compare: ['engineer', `${site}/compare/2026-02?cell=C3`],
  'compare, rolling': ['engineer', `${site}/compare/2026-02?view=rolling`],
  ledger: ['supervisor', `${site}/ledger/2026-02`],
  lab: ['lab', `${site}/lab/2026-03`],
  limits: ['manager', `${site}/limits/2026-03`],
  report: ['manager', `${site}/report/2025-Q4`],
  ahead: ['engineer', `${site}/ahead`],
  site: ['engineer', `${site}/site`],
  people: ['admin', `${site}/site`],
  trail: ['auditor', `${site}/trail`],
  method: ['engineer', `${site}/method`],
};

describe.each(Object.entries(pages))('%s', (_name, [role, path]) => {
  let visit: Visit;
  beforeAll(async () => {
    visit = await world.visit(desktop);
    await visit.comeInAs(role);
    await visit.go(path);
  });
  afterAll(() => visit.leave());

  it('has no finding of axe on a desktop and on a phone', async () => {
    expect(await axeFindings(visit.page)).toEqual([]);
    await visit.page.setViewportSize(phone);
    expect(await axeFindings(visit.page)).toEqual([]);
  });

  it('needs no sideways scrolling at 320 px, nor with text at 200 %', async () => {
    await visit.page.setViewportSize({ width: 320, height: 800 });
    expect(await sidewaysPx(visit.page)).toBe(0);
    await visit.page.setViewportSize(desktop);
    await visit.page.addStyleTag({ content: 'html { font-size: 200% } body { font-size: 32px !important }' });
    expect(await sidewaysPx(visit.page)).toBe(0);
  });

  it('has one h1, a title of its own, and the trade’s cautions where work can hurt', async () => {
    expect(await visit.page.getByRole('heading', { level: 1 }).count()).toBe(1);
    expect(await visit.page.title()).toContain('Tallyweir');
  });
});

let world: BrowserRecord;
beforeAll(async () => {
  world = await openBrowserRecord('demo_record');
});
afterAll(() => world.close());

describe('without a mouse', () => {
  it('the panel of a working takes the focus, gives it back, and closes with Escape', async () => {
    const visit = await world.visit(desktop);
    await visit.comeInAs('engineer');
    await visit.go(`${site}/balance/2026-02`);
    const number = visit.page.getByRole('button', { name: /working of Percolation/ }).first();
    await number.focus();
    await visit.page.keyboard.press('Enter');
    await visit.page.getByRole('dialog').waitFor();
    expect(await visit.page.evaluate(() => Boolean(document.activeElement?.closest('[role=dialog]')))).toBe(
      true,
    );
    await visit.page.keyboard.press('Escape');
    await expect.poll(() => visit.page.getByRole('dialog').count()).toBe(0);
    expect(await number.evaluate((element) => element === document.activeElement)).toBe(true);
    await visit.leave();
  });

  it('the first tab offers the way to the content', async () => {
    const visit = await world.visit(desktop);
    await visit.comeInAs('engineer');
    await visit.go(`${site}/month/2026-02`);
    await visit.page.keyboard.press('Tab');
    expect(await visit.page.evaluate(() => document.activeElement?.textContent)).toBe('To the content');
    await visit.leave();
  });

  it('a form with wrong answers names them all at the top, with the focus there and what was typed kept', async () => {
    const visit = await world.visit(desktop);
    await visit.comeInAs('engineer');
    await visit.go(`${site}/site`);
    await visit.page.getByRole('button', { name: 'Add a meter' }).click();
    await visit.page.getByLabel('Code', { exact: true }).fill('M9');
    await visit.page.getByRole('dialog').getByRole('button', { name: 'Add the meter' }).click();
    const summary = visit.page.getByRole('alert');
    await summary.waitFor();
    expect(await summary.textContent()).toMatch(/answers need another look/);
    await expect.poll(() => summary.evaluate((element) => element === document.activeElement)).toBe(true);
    expect(await visit.page.getByLabel('Code', { exact: true }).inputValue()).toBe('M9');
    expect(await axeFindings(visit.page)).toEqual([]);
    await visit.leave();
  });
});
