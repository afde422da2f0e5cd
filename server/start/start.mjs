// npm start: everything from a fresh clone to a served page, and everything it started stopped again.
import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { ensurePackages } from './packages.mjs';
import { startCluster } from './postgres.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));

async function main() {
  ensurePackages(root);
  const external = process.env.DATABASE_URL;
  const cluster = external ? undefined : await startCluster({ root });
  const watch = process.argv.includes('--watch');
  const server = spawn(
    process.execPath,
    ['--import', 'tsx', ...(watch ? ['--watch'] : []), 'server/main.ts'],
    {
      cwd: root,
      stdio: 'inherit',
      env: {
        ...process.env,
        NODE_ENV: process.env.NODE_ENV ?? (watch ? 'development' : 'production'),
        ...(cluster ? { CLUSTER_ADMIN_URL: cluster.adminUrl, DATA_FOLDER: cluster.folder } : {}),
      },
    },
  );
  let stopping = false;
  const stop = (signal) => {
    if (stopping) return;
    stopping = true;
    server.kill(signal);
  };
  process.on('SIGINT', () => stop('SIGTERM'));
  process.on('SIGTERM', () => stop('SIGTERM'));
  server.once('exit', async (code) => {
    await cluster?.stop();
    process.exit(code ?? 0);
  });
}

main().catch((error) => {
  console.error(error.message);
  process.exit(1);
});
