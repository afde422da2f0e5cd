// Installs the packages of the lock file when they are missing or the lock has changed.
// Plain Node, because nothing is installed yet when it runs.
import { createHash } from 'node:crypto';
import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';

/** @param {string} root project folder */
export function ensurePackages(root) {
  const lock = readFileSync(join(root, 'package-lock.json'));
  const wanted = createHash('sha256').update(lock).digest('hex');
  const marker = join(root, 'node_modules', '.tallyweir-lock');
  if (existsSync(marker) && readFileSync(marker, 'utf8') === wanted) return;
  console.log('Installing packages from the lock file (about a minute the first time) …');
  const npm = spawnSync('npm', ['ci', '--no-audit', '--no-fund', '--include=dev'], {
    cwd: root,
    stdio: ['ignore', 'inherit', 'inherit'],
  });
  if (npm.status !== 0) throw new Error('npm ci did not finish. Its own message is above.');
  writeFileSync(marker, wanted);
}
