import { createSiteDays } from '#shared/calendar/site-days.ts';
import { analyteTemplates } from '#shared/lab/analyte-templates.ts';
import type { LabCatalog } from '#shared/lab/resolve-lab-rows.ts';

/** A site's points, every template analyte under its code, and a laboratory with two letters. */
export const labCatalog = (change: Partial<LabCatalog> = {}): LabCatalog => ({
  points: [
    { id: 'eff', code: 'EFF-01', aliases: ['EFF'] },
    { id: 'c1', code: 'LCH-C1', aliases: [] },
    { id: 'c3', code: 'LCH-C3', aliases: [] },
  ],
  analytes: analyteTemplates.map((one) => ({ ...one, id: one.code })),
  qualifiers: new Map([
    ['U', 'non-detect'],
    ['J', 'estimated-below-reporting'],
  ]),
  mappings: new Map(),
  existing: new Map(),
  history: new Map(),
  receivedOn: '2026-03-19',
  localTime: createSiteDays([
    { validFromOn: '2020-01-01', timeZone: 'America/Chicago', dayBoundary: '00:00' },
  ]).localTime,
  answers: { dateOrder: null, equalToLimit: null },
  ...change,
});
