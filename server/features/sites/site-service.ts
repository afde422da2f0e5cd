import { Decimal } from 'decimal.js';
import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { createSiteDays, type SiteDays } from '#shared/calendar/site-days.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { Role } from '#shared/permissions.ts';
import type { siteInput, siteSettingsInput } from '#shared/schemas/sites.ts';
import { coverKindNames, coverTypeTemplates } from '#shared/water-balance/cover-types.ts';
import { recordChange } from '../../audit/record-change.ts';
import { remembered } from '../../db/remembered-reads.ts';
import type { Transaction } from '../../db/transaction.ts';
import { sha256Of } from '../../files/file-store.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { ensureAnalytes } from '../lab/analyte-service.ts';
import * as repository from './site-repository.ts';

/** Site of a call whose route carries a site id. */
export function siteOf(context: Context): string {
  if (!context.siteId) throw new Problem('not-found', 'This address names no site.');
  return context.siteId;
}

export async function siteDaysOf(tx: Transaction, siteId: string): Promise<SiteDays> {
  return remembered(tx, `days ${siteId}`, async () =>
    createSiteDays(await repository.listDayRules(tx, siteId)),
  );
}

const slugOf = (name: string) =>
  name
    .toLowerCase()
    .normalize('NFKD')
    .replace(/[^a-z0-9]+/g, '-')
    .replace(/^-|-$/g, '') || 'site';

/** Makes a site with its day rule, cover types as templates, the places every site has, and its own rain gauge. */
export async function createSite(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof siteInput>,
) {
  const { organisationId } = context;
  const { timeZone, dayBoundary, ...site } = input;
  await repository.insertSite(tx, { organisationId, slug: slugOf(input.name), ...site });
  await repository.insertDayRule(tx, {
    organisationId,
    id: deps.newId(),
    siteId: input.id,
    validFromOn: input.openedOn,
    timeZone,
    dayBoundary,
  });
  await repository.insertCoverTypes(
    tx,
    coverTypeTemplates.map((template) => ({
      organisationId,
      id: deps.newId(),
      siteId: input.id,
      kind: template.kind,
      name: coverKindNames[template.kind],
      availableWaterMm: String(template.availableWaterMm),
      hasSoilStore: template.availableWaterMm > 0,
      membranePassFraction:
        template.membranePassFraction === null ? null : String(template.membranePassFraction),
      runoffCoefficientWet: String(template.runoffCoefficientWet),
      runoffCoefficientDry: String(template.runoffCoefficientDry),
      runoffDestination: template.runoffDestination,
      petFactor: String(template.petFactor),
      source: template.source,
    })),
  );
  await repository.insertPlaces(
    tx,
    (['rain', 'air', 'treatment', 'outfall', 'haulage'] as const).map((kind) => ({
      organisationId,
      id: deps.newId(),
      siteId: input.id,
      kind,
      name: {
        rain: 'Rain',
        air: 'Air',
        treatment: 'Treatment plant',
        outfall: 'Outfall 1',
        haulage: 'Hauled away',
      }[kind],
    })),
  );
  const stationId = deps.newId();
  await repository.insertStation(tx, {
    organisationId,
    id: stationId,
    siteId: input.id,
    name: 'Site rain gauge',
    kind: 'site-gauge',
    priority: 1,
    source: 'read on the round',
  });
  await repository.insertRoundPoints(tx, [
    { organisationId, id: deps.newId(), siteId: input.id, position: 1, kind: 'rain', subjectId: stationId },
  ]);
  await ensureAnalytes(tx, context, deps);
  await recordChange(
    tx,
    { ...context, siteId: input.id },
    {
      action: 'create',
      subjectType: 'sites',
      subjectId: input.id,
      sentence: `Site ${input.name} was made.`,
      after: input,
    },
  );
  return { id: input.id, slug: slugOf(input.name) };
}

export async function listSites(tx: Transaction, context: Context, deps: Dependencies) {
  const rows = await repository.listSitesFor(tx, context.personId);
  return Promise.all(
    rows.map(async ({ site, roles }) => {
      const days = await siteDaysOf(tx, site.id);
      return {
        id: site.id,
        slug: site.slug,
        name: site.name,
        roles: roles as Role[],
        today: days.dayOf(deps.now().getTime()),
        displayUnits: site.displayUnits,
      };
    }),
  );
}

/** Drops trailing zeros that a numeric column adds, so that 42000.000 reads 42000. */
function plainNumbers<T>(rows: readonly T[]): T[] {
  const plain = (value: unknown) =>
    typeof value === 'string' && /^-?\d+\.\d+$/.test(value) ? new Decimal(value).toFixed() : value;
  return rows.map(
    (row) =>
      Object.fromEntries(Object.entries(row as object).map(([key, value]) => [key, plain(value)])) as T,
  );
}

/** A site with everything it is made of. */
export const readSite = (tx: Transaction, siteId: string) =>
  remembered(tx, `site ${siteId}`, () => loadSite(tx, siteId));

async function loadSite(tx: Transaction, siteId: string) {
  const site = await repository.findSite(tx, siteId);
  if (!site) throw new Problem('not-found', 'There is no such site.');
  const structure = await repository.readStructure(tx, siteId);
  const plain = Object.fromEntries(
    Object.entries(structure).map(([key, rows]) => [key, plainNumbers(rows as object[])]),
  ) as unknown as repository.SiteStructure;
  return { site: plainNumbers([site])[0]!, dayRules: await repository.listDayRules(tx, siteId), ...plain };
}
export type SiteRecord = Awaited<ReturnType<typeof readSite>>;

/** What an engineer may change of a site. */
const settingsOf = (site: SiteRecord['site']) => ({
  name: site.name,
  latitudeDeg: site.latitudeDeg,
  elevationM: site.elevationM,
  openedOn: site.openedOn,
  displayUnits: site.displayUnits,
  reportDueDays: site.reportDueDays,
  certificationText: site.certificationText,
});

const settingsTag = (site: SiteRecord['site']): string =>
  `"${sha256Of(JSON.stringify(settingsOf(site))).slice(0, 16)}"`;

/** The site as its page shows it, with the tag that a change of settings must name. */
export async function readSiteStructure(tx: Transaction, context: Context) {
  const record = await readSite(tx, siteOf(context));
  return { ...record, settingsTag: settingsTag(record.site) };
}

/**
 * Changes settings when nobody else did since they were read. A record that begins earlier takes its first day rule
 * along; it cannot begin after its first cell opened.
 */
export async function updateSettings(
  tx: Transaction,
  context: Context,
  input: z.output<typeof siteSettingsInput>,
  ifMatch: string | undefined,
) {
  const siteId = siteOf(context);
  const { site, cells, dayRules } = await readSite(tx, siteId);
  if (!ifMatch)
    throw fieldProblem('/if-match', 'Send the If-Match header with the tag of the settings you read.');
  if (ifMatch !== settingsTag(site)) {
    throw new Problem(
      'changed-meanwhile',
      `Somebody changed the settings meanwhile: the name is now "${site.name}", units ${site.displayUnits}, report due after ${site.reportDueDays} days. Look at them again and save once more.`,
    );
  }
  const early = cells.find((cell) => cell.openedOn < input.openedOn);
  if (early) {
    throw fieldProblem(
      '/openedOn',
      `Cell ${early.code} opened on ${dayName(early.openedOn)}; the record cannot begin after it.`,
    );
  }
  const after = { ...input, certificationText: input.certificationText ?? null };
  await repository.updateSite(tx, siteId, after);
  if (input.openedOn < dayRules[0]!.validFromOn)
    await repository.moveFirstDayRule(tx, dayRules[0]!.id, input.openedOn);
  await recordChange(tx, context, {
    action: 'change',
    subjectType: 'sites',
    subjectId: siteId,
    sentence: `Settings of ${input.name} were changed.`,
    before: settingsOf(site),
    after,
  });
  return { tag: settingsTag({ ...site, ...after }) };
}
