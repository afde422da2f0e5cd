import { readFileSync } from 'node:fs';
import { createRequire } from 'node:module';
import type { AddressInfo } from 'node:net';
import { chromium, type Browser, type BrowserContext, type Page } from 'playwright-core';
import { expect } from 'vitest';
import { demoPeople } from '#server/demo/demo-people.ts';
import type { Role } from '#shared/permissions.ts';
import { demoInstant } from './demo-instant.ts';
import { openTestRecord, type TestRecord } from './test-record.ts';

const axeSource = readFileSync(createRequire(import.meta.url).resolve('axe-core/axe.min.js'), 'utf8');
const flags = [
  '--no-sandbox',
  '--disable-gpu',
  '--disable-quic',
  '--no-first-run',
  '--disable-background-networking',
  '--disable-component-update',
  '--disable-sync',
];

export interface BrowserRecord {
  record: TestRecord;
  base: string;
  /** A page at the sign-in list; nobody is in yet. Errors of the page fail the test that closes it. */
  visit: (size?: { width: number; height: number }) => Promise<Visit>;
  close: () => Promise<void>;
}

export interface Visit {
  page: Page;
  context: BrowserContext;
  comeInAs: (role: Role) => Promise<void>;
  go: (path: string) => Promise<void>;
  /** Ends the visit; a script error or a failed console line fails here. */
  leave: () => Promise<void>;
}

export const phone = { width: 390, height: 844 };
export const desktop = { width: 1280, height: 900 };

/** The built application on a port of its own, with a browser whose clock stands at the demo's instant. */
export async function openBrowserRecord(
  template: 'empty_record' | 'demo_record',
  options: { withMail?: boolean } = {},
): Promise<BrowserRecord> {
  const record = await openTestRecord(template, options);
  const server = record.app.listen(0, '127.0.0.1');
  await new Promise((resolve) => server.once('listening', resolve));
  const base = `http://127.0.0.1:${(server.address() as AddressInfo).port}`;
  const browser: Browser = await chromium.launch({
    executablePath: process.env['CHROMIUM'] ?? '/usr/bin/chromium',
    args: flags,
  });
  return {
    record,
    base,
    visit: async (size = desktop) => {
      const context = await browser.newContext({ viewport: size, acceptDownloads: true });
      const page = await context.newPage();
      await page.clock.setFixedTime(demoInstant);
      const problems: string[] = [];
      page.on('pageerror', (error) => problems.push(error.message));
      page.on('console', (line) => {
        if (line.type() === 'error' && !/Failed to load resource/.test(line.text()))
          problems.push(line.text());
      });
      return {
        page,
        context,
        comeInAs: async (role) => {
          const person = demoPeople.find((one) => one.key === role)!;
          await page.goto(`${base}/sign-in`);
          await page.getByRole('button', { name: `Come in as ${person.displayName}` }).click();
          await page.waitForURL((url) => !url.pathname.startsWith('/sign-in'));
          await page.getByRole('heading', { level: 1 }).waitFor();
        },
        go: async (path) => {
          await page.goto(base + path);
          await page.getByRole('heading', { level: 1 }).waitFor();
          await page.waitForLoadState('networkidle');
        },
        leave: async () => {
          await context.close();
          expect(problems).toEqual([]);
        },
      };
    },
    close: async () => {
      await browser.close();
      await new Promise((resolve) => server.close(resolve));
      await record.close();
    },
  };
}

/** What axe finds on the page against WCAG 2.2 AA and its own good practice, as lines. */
export async function axeFindings(page: Page): Promise<string[]> {
  await page.evaluate(axeSource);
  return page.evaluate(async () => {
    const { axe } = window as unknown as {
      axe: {
        run: (
          root: Document,
          options: object,
        ) => Promise<{ violations: { id: string; nodes: { html: string }[] }[] }>;
      };
    };
    const { violations } = await axe.run(document, {
      runOnly: ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa', 'best-practice'],
    });
    return violations.map(
      (one) =>
        `${one.id}: ${one.nodes
          .slice(0, 2)
          .map((node) => node.html.slice(0, 120))
          .join(' | ')}`,
    );
  });
}

/** How far the page scrolls sideways, px. */
export const sidewaysPx = (page: Page) =>
  page.evaluate(() => document.documentElement.scrollWidth - document.documentElement.clientWidth);
