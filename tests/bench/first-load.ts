import { chromium } from 'playwright-core';
import { median } from './measure.ts';
import type { World } from './world.ts';

const slowedTimes = 4;

/** First load of Round on a cold cache with a slowed processor: bytes over the wire and time until a point can be opened. */
export async function benchFirstLoad(world: World): Promise<string[]> {
  const cookie = await world.cookieOf('operator');
  const [name, value] = cookie.split('=') as [string, string];
  const browser = await chromium.launch({
    executablePath: process.env['CHROMIUM']!,
    args: ['--no-sandbox', '--disable-gpu', '--disable-background-networking'],
  });
  const runs: { bytes: number; ms: number }[] = [];
  for (let run = 0; run < 6; run += 1) {
    const context = await browser.newContext({ viewport: { width: 390, height: 844 } });
    await context.addCookies([{ name, value, url: world.base }]);
    const page = await context.newPage();
    const session = await context.newCDPSession(page);
    await session.send('Network.enable');
    await session.send('Emulation.setCPUThrottlingRate', { rate: slowedTimes });
    let bytes = 0;
    session.on('Network.loadingFinished', (event) => {
      bytes += event.encodedDataLength;
    });
    const start = performance.now();
    await page.goto(`${world.base}/sites/varrow-hill/round/2026-03-18`);
    await page.locator('ol > li button').first().waitFor();
    const ms = performance.now() - start;
    await page.waitForLoadState('networkidle');
    if (run > 0) runs.push({ bytes, ms });
    await context.close();
  }
  await browser.close();
  return [
    `First load of Round, cold cache, processor slowed ${slowedTimes} times: ${(median(runs.map((one) => one.bytes)) / 1000).toFixed(0)} kB over the wire, usable after ${median(runs.map((one) => one.ms)).toFixed(0)} ms (median of ${runs.length}).`,
  ];
}
