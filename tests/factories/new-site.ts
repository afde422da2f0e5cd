import type { SiteStructureView } from '#shared/views/site-view.ts';
import { siteIdOf, write, type Agent, type TestRecord } from '../setup/test-record.ts';

export const id = () => crypto.randomUUID();

export interface NewSite {
  siteId: string;
  engineer: Agent;
  /** The same person may do it all here: engineer, administrator and manager. */
  view: () => Promise<SiteStructureView>;
  coverTypeId: (kind: string) => Promise<string>;
  placeId: (kind: string) => Promise<string>;
}

const password = 'four plain words here';

/** An organisation of its own with one person in every role, and one empty site. */
export async function makeSite(
  record: TestRecord,
  change: Partial<
    Record<'dayBoundary' | 'timeZone' | 'openedOn' | 'latitudeDeg' | 'displayUnits', string>
  > = {},
): Promise<NewSite> {
  const engineer = record.visitor();
  await engineer
    .post('/api/v1/first-run')
    .send({
      organisationName: 'Test Waste',
      displayName: 'Every Role',
      email: 'every@test.example',
      password,
    })
    .expect(201);
  const organisationId = (await engineer.get('/api/v1/me')).body.organisationId as string;
  const personId = (await engineer.get('/api/v1/me')).body.personId as string;
  for (const role of ['engineer', 'manager', 'operator', 'supervisor'])
    await record.admin.query(
      'insert into memberships (organisation_id, id, person_id, role) values ($1, gen_random_uuid(), $2, $3)',
      [organisationId, personId, role],
    );
  await write(engineer, '/sites', {
    id: id(),
    name: 'Northcote',
    latitudeDeg: '37.6475',
    elevationM: '402',
    timeZone: 'America/Chicago',
    dayBoundary: '08:00',
    openedOn: '1980-01-01',
    displayUnits: 'metric',
    ...change,
  }).expect(201);
  const siteId = await siteIdOf(engineer);
  const view = async () =>
    (await engineer.get(`/api/v1/sites/${siteId}`).expect(200)).body as SiteStructureView;
  return {
    siteId,
    engineer,
    view,
    coverTypeId: async (kind) => (await view()).coverTypes.find((one) => one.kind === kind)!.id,
    placeId: async (kind) => (await view()).places.find((one) => one.kind === kind)!.id,
  };
}

/** A cell of one plot under one cover. */
export async function addCell(
  site: NewSite,
  kind: string,
  change: Record<string, unknown> = {},
): Promise<{ cellId: string; plotId: string }> {
  const [cellId, plotId] = [id(), id()];
  await write(site.engineer, `/sites/${site.siteId}/cells`, {
    id: cellId,
    code: 'C1',
    name: 'North',
    linedAreaM2: '42000',
    openedOn: '1980-01-01',
    evidence: 'survey',
    plots: [{ id: plotId, name: 'Whole', areaM2: '42000', coverTypeId: await site.coverTypeId(kind) }],
    ...change,
  }).expect(201);
  return { cellId, plotId };
}

/** A sump in the cell with a meter from it to the plant. */
export async function addMeteredSump(
  site: NewSite,
  cellId: string,
  meter: Record<string, unknown> = {},
): Promise<{ meterId: string; sumpId: string }> {
  const [sumpId, placeId, meterId] = [id(), id(), id()];
  await write(site.engineer, `/sites/${site.siteId}/sumps`, {
    id: sumpId,
    placeId,
    cellId,
    code: 'S1',
    kind: 'primary',
    areaServedM2: '42000',
    linerLowPointAboveFloorM: '0.6',
    sensorAboveFloorM: '0.08',
    headLimitM: '0.3',
  }).expect(201);
  await write(site.engineer, `/sites/${site.siteId}/meters`, {
    id: meterId,
    code: 'S1',
    name: 'North sump',
    fromPlaceId: placeId,
    toPlaceId: await site.placeId('treatment'),
    sumpId,
    digits: '7',
    decimals: '0',
    unit: 'm3',
    multiplier: '1',
    rateM3PerDayMax: '400',
    installedOn: '2026-01-01',
    ...meter,
  }).expect(201);
  return { meterId, sumpId };
}
