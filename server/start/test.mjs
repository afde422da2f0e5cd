// npm test: throw-away database, Chromium, then type check, lint and every test. Ends with "N passed, N failed".
import { spawnSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { ensureChromium, ensurePostgresPrograms } from './debian.mjs';
import { ensurePackages } from './packages.mjs';

const root = fileURLToPath(new URL('../..', import.meta.url));

/** Runs one step and says whether it went well. @param {string} name @param {string[]} args */
function step(name, args, env = {}) {
  console.log(`\n== ${name}`);
  const started = Date.now();
  const run = spawnSync(process.execPath, args, {
    cwd: root,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, ...env },
  });
  console.log(
    `== ${name}: ${run.status === 0 ? 'done' : 'failed'} in ${((Date.now() - started) / 1000).toFixed(1)} s`,
  );
  return run.status === 0;
}

ensurePackages(root);
ensurePostgresPrograms();
const chromium = ensureChromium();

const only = process.argv.slice(2);
const folder = mkdtempSync(join(tmpdir(), 'tallyweir-test-'));
const report = join(folder, 'report.json');
const checks = only.length
  ? []
  : [
      step('type check', ['node_modules/typescript-native/bin/tsc', '-p', '.']),
      step('lint', [
        'node_modules/eslint/bin/eslint.js',
        '--config',
        '.eslint.config.js',
        '--max-warnings',
        '0',
        '.',
      ]),
      step('migrations agree with the schema', ['node_modules/drizzle-kit/bin.cjs', 'check']),
      step('client build', ['node_modules/vite/bin/vite.js', 'build', '--logLevel', 'warn']),
    ];
const tests = step(
  'tests',
  [
    'node_modules/vitest/vitest.mjs',
    'run',
    '--reporter=default',
    '--reporter=json',
    `--outputFile.json=${report}`,
    ...only,
  ],
  { CHROMIUM: chromium, TEST_FOLDER: folder },
);

let passed = checks.filter(Boolean).length;
let failed = checks.length - passed;
try {
  const result = JSON.parse(readFileSync(report, 'utf8'));
  const suitesThatDidNotRun = result.testResults.filter(
    (file) => file.status === 'failed' && file.assertionResults.length === 0,
  );
  passed += result.numPassedTests;
  failed += result.numFailedTests + suitesThatDidNotRun.length + (result.numPendingTests ?? 0);
  if (!tests && failed === 0) failed += 1;
} catch {
  failed += 1;
}
rmSync(folder, { recursive: true, force: true });
console.log(`\n${passed} passed, ${failed} failed`);
process.exit(failed === 0 ? 0 : 1);
