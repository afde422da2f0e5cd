import { createHash } from 'node:crypto';
import { existsSync, readFileSync, readdirSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import type { Env } from './env.ts';

const root = fileURLToPath(new URL('..', import.meta.url));
const sources = ['src', 'shared', 'index.html', 'vite.config.ts', 'package-lock.json'];

/** SHA-256 over every file the client is built from. */
function sourceHash(): string {
  const hash = createHash('sha256');
  const add = (path: string): void => {
    const full = join(root, path);
    if (!existsSync(full)) return;
    try {
      for (const name of readdirSync(full).sort()) add(join(path, name));
    } catch {
      hash.update(path).update(readFileSync(full));
    }
  };
  sources.forEach(add);
  return hash.digest('hex');
}

/** Builds the pages when their sources changed since the last build; in development Vite serves them. */
export async function buildClient(env: Env): Promise<void> {
  if (env.NODE_ENV !== 'production') return;
  const marker = join(root, 'dist', 'client', 'built-from.txt');
  const wanted = sourceHash();
  if (existsSync(marker) && readFileSync(marker, 'utf8') === wanted) return;
  process.stdout.write('Building the pages …\n');
  const { build } = await import('vite');
  await build({ root, logLevel: 'warn' });
  writeFileSync(marker, wanted);
}
