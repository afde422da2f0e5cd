import { spawnSync } from 'node:child_process';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import ExcelJS from 'exceljs';
import type { World } from './world.ts';

const recalculateAlways = `<?xml version="1.0" encoding="UTF-8"?><oor:items xmlns:oor="http://openoffice.org/2001/registry"><item oor:path="/org.openoffice.Office.Calc/Formula/Load"><prop oor:name="OOXMLRecalcMode"><value>0</value></prop></item></oor:items>`;

/** Recomputes the quarterly workbook in LibreOffice, where it is installed, and compares every number with the stored one. */
export async function recomputeInOffice(world: World): Promise<string> {
  if (spawnSync('soffice', ['--version']).status !== 0)
    return 'LibreOffice is not installed here: the workbook was recomputed by HyperFormula in the tests only.';
  const folder = join(process.env['BENCH_FOLDER']!, 'office');
  const profile = join(folder, 'profile', 'user');
  mkdirSync(profile, { recursive: true });
  writeFileSync(join(profile, 'registrymodifications.xcu'), recalculateAlways);
  const cookie = await world.cookieOf('engineer');
  const bytes = Buffer.from(
    await (
      await fetch(`${world.base}/api/v1/sites/${world.siteId}/reports/2025-Q4/preview`, {
        headers: { cookie },
      })
    ).arrayBuffer(),
  );
  writeFileSync(join(folder, 'quarter.xlsx'), bytes);
  mkdirSync(join(folder, 'out'));
  spawnSync('soffice', [
    `-env:UserInstallation=file://${join(folder, 'profile')}`,
    '--headless',
    '--convert-to',
    'xlsx',
    '--outdir',
    join(folder, 'out'),
    join(folder, 'quarter.xlsx'),
  ]);
  const [ours, theirs] = [new ExcelJS.Workbook(), new ExcelJS.Workbook()];
  await ours.xlsx.load(bytes as never);
  await theirs.xlsx.load(readFileSync(join(folder, 'out', 'quarter.xlsx')) as never);
  let [count, worst] = [0, 0];
  for (const sheet of ours.worksheets) {
    sheet.eachRow((row, number) =>
      row.eachCell((cell, column) => {
        if (typeof cell.result !== 'number') return;
        count += 1;
        worst = Math.max(
          worst,
          Math.abs(cell.result - Number(theirs.getWorksheet(sheet.name)!.getCell(number, column).result)) /
            Math.max(1, Math.abs(cell.result)),
        );
      }),
    );
  }
  return `LibreOffice recomputed ${count} formulas of the quarterly workbook; the largest relative difference is ${worst.toExponential(1)}.`;
}
