import { cpus, totalmem } from 'node:os';
import { benchApi } from './api.ts';
import { benchBalance } from './balance.ts';
import { benchEngine } from './engine.ts';
import { benchFirstLoad } from './first-load.ts';
import { printTable } from './measure.ts';
import { recomputeInOffice } from './office.ts';
import { benchSpreadsheets } from './spreadsheets.ts';
import { openWorld } from './world.ts';

/** Parts named after `npm run bench --`; all of them when none is named. */
const named = process.argv.slice(2);
const wants = (part: string) => named.length === 0 || named.includes(part);

const processors = cpus();
console.log(
  `Machine: ${processors.length} × ${processors[0]?.model.trim()}, ${(totalmem() / 2 ** 30).toFixed(0)} GiB, Node ${process.version}. Medians of five to seven runs.`,
);
if (wants('engine')) printTable('Engine', await benchEngine());
const world = await openWorld();
if (wants('api')) printTable('API', await benchApi(world));
if (wants('balance')) printTable('Balance', await benchBalance(world));
if (wants('spreadsheets')) printTable('Spreadsheets', await benchSpreadsheets(world));
if (wants('pages'))
  for (const line of [...(await benchFirstLoad(world)), await recomputeInOffice(world)])
    console.log(`\n${line}`);
await world.close();
