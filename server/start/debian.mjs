// Debian packages the project needs: PostgreSQL for every command, Chromium for the browser tests.
import { spawnSync } from 'node:child_process';
import { existsSync, mkdirSync, readdirSync, realpathSync, writeFileSync } from 'node:fs';
import { delimiter, dirname, join } from 'node:path';

/** Path of a program on PATH, or undefined. @param {string} name */
function onPath(name) {
  return (process.env.PATH ?? '')
    .split(delimiter)
    .map((folder) => join(folder, name))
    .find((file) => existsSync(file));
}

/**
 * Runs apt-get as root or with sudo.
 * @param {string} packageName @param {string} why what the person can do when it cannot be installed
 */
function aptInstall(packageName, why) {
  const root = process.getuid?.() === 0;
  const sudo = !root && onPath('sudo') && spawnSync('sudo', ['-n', 'true']).status === 0;
  if (!onPath('apt-get') || (!root && !sudo)) throw new Error(why);
  console.log(`Installing Debian's ${packageName} …`);
  const run = (args) =>
    spawnSync(
      root ? args[0] : 'sudo',
      root ? args.slice(1) : ['-n', 'env', 'DEBIAN_FRONTEND=noninteractive', ...args],
      {
        stdio: ['ignore', 'ignore', 'inherit'],
        env: { ...process.env, DEBIAN_FRONTEND: 'noninteractive' },
      },
    );
  run(['apt-get', 'update']);
  const done = run(['apt-get', 'install', '-y', '--no-install-recommends', packageName]);
  if (done.status !== 0) throw new Error(why);
}

/** Folder with initdb and postgres of the highest installed major version, or undefined. */
function installedPostgres() {
  const fromEnvironment = process.env.POSTGRES_BIN;
  if (fromEnvironment) return fromEnvironment;
  const debian = '/usr/lib/postgresql';
  if (existsSync(debian)) {
    const majors = readdirSync(debian)
      .filter(
        (name) =>
          existsSync(join(debian, name, 'bin', 'initdb')) &&
          existsSync(join(debian, name, 'bin', 'postgres')),
      )
      .sort((a, b) => Number(b) - Number(a));
    if (majors[0]) return join(debian, majors[0], 'bin');
  }
  const initdb = onPath('initdb');
  return initdb ? dirname(realpathSync(initdb)) : undefined;
}

/** Folder of PostgreSQL's programs; installs Debian's package when there is none. */
export function ensurePostgresPrograms() {
  const found = installedPostgres();
  if (found) return found;
  const why =
    'Tallyweir needs PostgreSQL 15 or newer: install it (on Debian: apt-get install postgresql) and start again.';
  if (process.getuid?.() === 0) {
    mkdirSync('/etc/postgresql-common/createcluster.d', { recursive: true });
    writeFileSync('/etc/postgresql-common/createcluster.d/tallyweir.conf', 'create_main_cluster = false\n');
  }
  aptInstall('postgresql', why);
  const installed = installedPostgres();
  if (!installed) throw new Error(why);
  return installed;
}

/** Path of Chromium; installs Debian's package when there is none. */
export function ensureChromium() {
  const find = () => process.env.CHROMIUM ?? onPath('chromium');
  if (!find())
    aptInstall(
      'chromium',
      'The browser tests need Chromium: install it (on Debian: apt-get install chromium) and start again.',
    );
  return find();
}
