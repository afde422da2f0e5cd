// npm run bench: figures as ratios beside a bare equivalent, on a throw-away database.
import { spawnSync } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { ensureChromium, ensurePostgresPrograms } from './debian.mjs';
import { ensurePackages } from './packages.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));
ensurePackages(root);
ensurePostgresPrograms();
const chromium = ensureChromium();
const { startCluster } = await import('./postgres.mjs');
const folder = mkdtempSync(join(tmpdir(), 'tallyweir-bench-'));
const clusterFolder = join('/var/tmp', `tallyweir-bench-${process.pid}`);
// A cluster with the settings of a record, not of a test: every commit reaches the disk.
const cluster = await startCluster({ root, folder: clusterFolder });
const built = spawnSync(process.execPath, ['node_modules/vite/bin/vite.js', 'build', '--logLevel', 'warn'], {
  cwd: root,
  stdio: 'inherit',
});
const run =
  built.status === 0 &&
  spawnSync(process.execPath, ['--import', 'tsx', 'tests/bench/run.ts', ...process.argv.slice(2)], {
    cwd: root,
    stdio: 'inherit',
    env: {
      ...process.env,
      CLUSTER_ADMIN_URL: cluster.adminUrl,
      BENCH_FOLDER: folder,
      CHROMIUM: chromium,
      TZ: 'UTC',
    },
  });
await cluster.stop();
for (const one of [folder, clusterFolder]) rmSync(one, { recursive: true, force: true });
process.exit(run && run.status === 0 ? 0 : 1);
