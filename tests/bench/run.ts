import { cpus, totalmem } from 'node:os';
import { benchApi } from './api.ts';
import { benchEngine } from './engine.ts';
import { benchFirstLoad } from './first-load.ts';
import { printTable } from './measure.ts';
import { recomputeInOffice } from './office.ts';
import { benchSpreadsheets } from './spreadsheets.ts';
import { openWorld } from './world.ts';

const processors = cpus();
console.log(
  `Machine: ${processors.length} × ${processors[0]?.model.trim()}, ${(totalmem() / 2 ** 30).toFixed(0)} GiB, Node ${process.version}. Medians of five to seven runs.`,
);
printTable('Engine', await benchEngine());
const world = await openWorld();
printTable('API', await benchApi(world));
printTable('Spreadsheets', await benchSpreadsheets(world));
for (const line of [...(await benchFirstLoad(world)), await recomputeInOffice(world)])
  console.log(`\n${line}`);
await world.close();
