import { hold, warn, type LabRow } from './lab-row.ts';
import { readCas } from './read-cas.ts';
import type { LabCatalog } from './resolve-lab-rows.ts';
import { mappingKey, tidyName } from './tidy-name.ts';

/** Name, fraction and basis that a laboratory writes into one text: "Zinc, Total", "Ammonia (as N)". */
export function splitAnalyteText(text: string): {
  name: string;
  fraction: string;
  basis: string | null;
  unit: string;
} {
  const unit = /\s((?:m|u|µ|μ|n)?g\/l)$/i.exec(text)?.[1] ?? '';
  const withoutUnit = unit ? text.slice(0, -unit.length) : text;
  const basis = /\(?\bas ([A-Za-z0-9]+)\)?/.exec(withoutUnit)?.[1] ?? null;
  const fraction = /\bdissolved\b|\bdiss\.?/i.test(withoutUnit)
    ? 'dissolved'
    : /\btotal recoverable\b/i.test(withoutUnit)
      ? 'total recoverable'
      : /\btotal\b/i.test(withoutUnit)
        ? 'total'
        : '';
  const name = withoutUnit
    .replace(/\(?\bas [A-Za-z0-9]+\)?/, '')
    .replace(/[,(]?\s*\b(total recoverable|total|dissolved|diss\.?)\b\)?/i, '')
    .replace(/[,\s]+$/, '')
    .trim();
  return { name, fraction, basis, unit };
}

type Analyte = LabCatalog['analytes'][number];

/** Known by its name, whole or without its fraction; "Zn-T" and "Zn-D" carry the fraction as a letter. */
function findByName(text: string, name: string, analytes: readonly Analyte[]) {
  const named = (own: string) =>
    analytes.find((one) => [one.name, one.code, ...one.aliases].some((other) => tidyName(other) === own));
  // "Total suspended solids" is a name of its own, not a fraction of "suspended solids".
  const whole = named(tidyName(text));
  if (whole) return { analyte: whole, isWhole: true, letter: '' };
  const plain = named(tidyName(name));
  if (plain) return { analyte: plain, isWhole: false, letter: '' };
  const [, stem = '', letter = ''] = /^(.+?)[-\s]([TD])$/.exec(name) ?? [];
  const analyte = stem ? named(tidyName(stem)) : undefined;
  return analyte ? { analyte, isWhole: false, letter } : null;
}

/** Says how the CAS number was read, and holds the row where name and number speak of two parameters. */
function compareWithCas(row: LabRow, analyte: Analyte, byCas: Analyte | undefined, isMapped: boolean): void {
  const read = readCas(row.cas);
  if (!read)
    return warn(row, `"${row.cas}" is no CAS number: its check digit does not fit. The name decides.`);
  if (read.howRead) warn(row, read.howRead);
  if (isMapped || analyte.cas === null || analyte.cas === read.cas) return;
  if (byCas)
    hold(row, 'analyte', `"${row.analyteText}" and CAS number ${read.cas}, ${byCas.name}, do not agree.`);
  else warn(row, `CAS number ${read.cas} is not the one kept for ${analyte.name}, ${analyte.cas}.`);
}

/** Looks the parameter up by the laboratory's remembered answer, by name, then by CAS number. */
export function resolveAnalyte(
  row: LabRow,
  catalog: LabCatalog,
): { basis: string | null; standardUnit: string; reportedBasis: string | null; unitInName: string } | null {
  const split = splitAnalyteText(row.analyteText);
  const mapped = catalog.mappings.get(mappingKey('analyte', row.analyteText));
  const byAnswer = catalog.analytes.find((one) => one.id === mapped);
  const byName = findByName(row.analyteText, split.name, catalog.analytes);
  const cas = readCas(row.cas)?.cas;
  const byCas = catalog.analytes.find((one) => one.cas !== null && one.cas === cas);
  const analyte = byAnswer ?? byName?.analyte ?? byCas;
  if (!analyte) {
    hold(row, 'analyte', `Parameter "${row.analyteText}" is not known here.`);
    return null;
  }
  // "n/a" and "-" beside a summary parameter are no number that could be wrong.
  if (/\d/.test(row.cas)) compareWithCas(row, analyte, byCas, byAnswer !== undefined);
  if (!byAnswer && !byName) warn(row, `"${row.analyteText}" is taken for ${analyte.name} by its CAS number.`);
  row.analyteId = analyte.id;
  const suffix = byName?.letter === 'D' ? 'dissolved' : byName?.letter === 'T' ? 'total' : '';
  row.fraction =
    (byName?.isWhole ? '' : split.fraction || suffix) || row.fractionText || analyte.defaultFraction || '';
  return {
    basis: analyte.basis,
    standardUnit: analyte.standardUnit,
    reportedBasis: split.basis,
    unitInName: split.unit,
  };
}
