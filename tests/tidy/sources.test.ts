import { existsSync, readFileSync, readdirSync } from 'node:fs';
import { join, relative } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';

const root = fileURLToPath(new URL('../..', import.meta.url));
const leftOut = new Set(['node_modules', 'dist', '.git', '.tallyweir']);

/** Every text file of the project, with its path from the root. */
const filesUnder = (folder: string): string[] =>
  readdirSync(join(root, folder), { withFileTypes: true }).flatMap((entry) =>
    leftOut.has(entry.name)
      ? []
      : entry.isDirectory()
        ? filesUnder(join(folder, entry.name))
        : [relative(root, join(root, folder, entry.name))],
  );
const files = filesUnder('.');
const sources = files.filter((file) => /\.(ts|tsx|mjs|js|css)$/.test(file));
const text = (file: string) => readFileSync(join(root, file), 'utf8');
/** Places where a pattern occurs, as file and line. */
const places = (among: readonly string[], pattern: RegExp) =>
  among.flatMap((file) =>
    text(file)
      .split('\n')
      .flatMap((line, index) =>
        pattern.test(line) ? [`${file}:${index + 1}: ${line.trim().slice(0, 100)}`] : [],
      ),
  );

describe('the tree', () => {
  it('has only what belongs in the root', () => {
    const allowed = new Set([
      'README.md',
      'DEVELOPERS.md',
      'package.json',
      'tsconfig.json',
      'vite.config.ts',
      'drizzle.config.ts',
      'index.html',
      'src',
      'server',
      'shared',
      'drizzle',
      'tests',
      'data',
      'package-lock.json',
      'node_modules',
      'dist',
    ]);
    expect(readdirSync(root).filter((name) => !name.startsWith('.') && !allowed.has(name))).toEqual([]);
  });

  it('names files in lower case with dashes', () => {
    const odd = files.filter(
      (file) =>
        !/^(README|DEVELOPERS|data\/SOURCES)\.md$/.test(file) &&
        !file.startsWith('drizzle/') &&
        !/^(\.?[a-z0-9]+(\/|$))*[a-z0-9._/-]+$/.test(file),
    );
    expect(odd.filter((file) => !file.startsWith('.'))).toEqual([]);
  });

  it('keeps every source under 400 lines', () => {
    expect(sources.filter((file) => text(file).split('\n').length > 400)).toEqual([]);
  });

  it('has no folder that says nothing', () => {
    expect(files.filter((file) => /(^|\/)(utils|helpers|misc|common)\//.test(file))).toEqual([]);
  });
});

describe('the code', () => {
  const product = sources.filter((file) => /^(src|server|shared)\//.test(file));

  it('keeps shared pure: no clock, no chance, no input or output', () => {
    expect(
      places(
        product.filter((file) => file.startsWith('shared/')),
        /\bDate\.now\(|new Date\(\)|Math\.random|from 'node:|process\.env|\bfetch\(/,
      ),
    ).toEqual([]);
  });

  it('asks the clock and chance only where they enter', () => {
    expect(
      places(
        product.filter((file) => file.startsWith('server/features/')),
        /\bDate\.now\(|new Date\(\)|Math\.random/,
      ),
    ).toEqual([]);
  });

  it('opens transactions and sets the organisation in one place', () => {
    const others = product.filter(
      (file) =>
        file.startsWith('server/') && !['server/db/transaction.ts', 'server/db/wall.ts'].includes(file),
    );
    expect(places(others, /set_config\(|\.transaction\(/)).toEqual([]);
  });

  it('writes SQL only in repositories, the database folder, the trail and the demo', () => {
    const services = product.filter((file) => /^server\/features\/.*-routes\.ts$/.test(file));
    expect(places(services, /from 'drizzle-orm/)).toEqual([]);
  });

  it('has nothing left undone, skipped or singled out', () => {
    const word = new RegExp(['TO', 'DO|FIX', 'ME|XX', 'X\\b'].join(''));
    const others = sources.filter((file) => file !== 'tests/tidy/sources.test.ts');
    expect(places(others, word)).toEqual([]);
    expect(
      places(
        others.filter((file) => file.startsWith('tests/')),
        /\b(it|describe|test)\.(skip|only|todo)\b/,
      ),
    ).toEqual([]);
  });

  it('never silences the type checker', () => {
    expect(places(product, /@ts-(ignore|nocheck|expect-error)|eslint-disable|: any\b|\bas any\b/)).toEqual(
      [],
    );
  });
});

describe('the words', () => {
  const pages = sources.filter((file) => /^(src|shared)\//.test(file));

  it('says neither please nor sorry, valid nor invalid, to a person', () => {
    const strings = /(['"`>])[^'"`<>]*\b(please|sorry|oops|invalid|forbidden)\b[^'"`<>]*(['"`<])/i;
    expect(places(pages, strings).filter((line) => !/aria-invalid/.test(line))).toEqual([]);
  });

  it('names no machine and no registry', () => {
    const machine = new RegExp(
      ['/ho', 'me/|/wo', 'rk/|/ro', 'ot/|registry\\.npm', 'js|local', 'host:\\d'].join(''),
    );
    expect(
      places(
        files.filter(
          (file) =>
            /\.(ts|tsx|mjs|js|json|md|sql|html|css)$/.test(file) && file !== 'tests/tidy/sources.test.ts',
        ),
        machine,
      ),
    ).toEqual([]);
  });

  it('tells where each set of shipped data comes from', () => {
    const told = text('data/SOURCES.md');
    for (const file of files.filter((one) => one.startsWith('data/') && !one.endsWith('.md')))
      expect(told, file).toContain(file.slice('data/'.length));
  });
});

describe('the documents', () => {
  it('name only commands and files that exist', () => {
    const scripts = Object.keys(
      (JSON.parse(text('package.json')) as { scripts: Record<string, string> }).scripts,
    );
    for (const document of ['README.md', 'DEVELOPERS.md']) {
      const words = text(document);
      for (const [, script] of words.matchAll(/npm run ([\w:]+)/g))
        expect(scripts, document).toContain(script);
      for (const [, path] of words.matchAll(/`((?:src|server|shared|tests|data|drizzle)\/[\w./-]+)`/g))
        expect(existsSync(join(root, path!.replace(/\/$/, ''))), `${document}: ${path}`).toBe(true);
    }
  });

  it('give a reason for every dependency', () => {
    const { dependencies, devDependencies } = JSON.parse(text('package.json')) as {
      dependencies: Record<string, string>;
      devDependencies: Record<string, string>;
    };
    const told = text('DEVELOPERS.md');
    const untold = [...Object.keys(dependencies), ...Object.keys(devDependencies)].filter(
      (name) => !name.startsWith('@types/') && !told.includes(`\`${name}\``),
    );
    expect(untold).toEqual([]);
  });
});
