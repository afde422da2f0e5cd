import { addDays, firstDay } from '#shared/calendar/day.ts';
import { addMonths, monthRange } from '#shared/calendar/month.ts';
import { rectangularPondTable } from '#shared/ledger/store-volume.ts';
import type { CoverKind } from '#shared/water-balance/cover-types.ts';
import { headerShares, pumpTests, pumps } from '../db/schema/metering.ts';
import { roundPoints } from '../db/schema/sites.ts';
import type { Transaction } from '../db/transaction.ts';
import { addWaste, createCell } from '../features/sites/cell-service.ts';
import { changeCover, confirmCoverType } from '../features/sites/cover-service.ts';
import { createMeter, createPlace, createStore, createSump } from '../features/sites/metering-service.ts';
import { createSite, readSiteStructure, updateSettings } from '../features/sites/site-service.ts';
import type { Context, Dependencies } from '../http/route.ts';
import { eq } from 'drizzle-orm';
import type { DemoPlan } from './demo-plan.ts';
import type { Random } from './random.ts';

export const pondShape = { bottomWidthM: 30, bottomLengthM: 50, sideSlope: 2, depthM: 3.5, rowCount: 15 };

export interface DemoIds {
  site: string;
  gauge: string;
  pond: { store: string; place: string };
  sumps: Record<'S1' | 'S2' | 'S3' | 'L3', { sump: string; place: string }>;
  cells: Record<'C1' | 'C2' | 'C3', string>;
  meters: Record<'H1' | 'S3' | 'L3' | 'P1' | 'O1', string>;
  pump: string;
  places: { header: string; treatment: string; outfall: string; haulage: string };
}

const certification =
  'I certify that this report was prepared under my supervision by people who know the work, and that to the best of my knowledge it is true, accurate and complete. I am aware that there are penalties for knowingly submitting false information. (Permit VH-207, part 6.2, invented for this demo.)';

/** Makes the invented site: three cells in different states, sumps, meters, a pond. */
export async function makeDemoSite(
  tx: Transaction,
  engineer: Context,
  deps: Dependencies,
  plan: DemoPlan,
  random: Random,
): Promise<DemoIds> {
  const id = random.id;
  const site = id();
  const facts = {
    name: 'Varrow Hill',
    latitudeDeg: '53.4',
    elevationM: '118',
    openedOn: '2011-05-02',
    displayUnits: 'metric' as const,
  };
  await createSite(tx, { ...engineer, siteId: null }, deps, {
    id: site,
    ...facts,
    timeZone: 'Europe/London',
    dayBoundary: '00:00',
  });
  const context = { ...engineer, siteId: site };
  const before = await readSiteStructure(tx, context);
  await updateSettings(
    tx,
    context,
    { ...facts, reportDueDays: 60, certificationText: certification },
    before.settingsTag,
  );
  for (const type of before.coverTypes.slice(0, 5)) await confirmCoverType(tx, context, deps, type.id);
  const cover = (kind: CoverKind) => before.coverTypes.find((type) => type.kind === kind)!.id;
  const place = (kind: string) => before.places.find((one) => one.kind === kind)!.id;
  const { cells, openedOn } = await makeCells(tx, context, deps, plan, random, cover);
  const places = { treatment: place('treatment'), outfall: place('outfall'), haulage: place('haulage') };
  const sumps = await makeSumps(tx, context, random, cells);
  const metering = await makeMetering(tx, context, deps, plan, random, { cells, sumps, places, openedOn });
  return { site, gauge: before.stations[0]!.id, cells, sumps, ...metering };
}

/** Three cells: one closed, one under intermediate soil, one young, with the waste it receives. */
async function makeCells(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  plan: DemoPlan,
  random: Random,
  cover: (kind: CoverKind) => string,
): Promise<{ cells: DemoIds['cells']; openedOn: string }> {
  const id = random.id;
  const cells = { C1: id(), C2: id(), C3: id() };
  await createCell(tx, context, deps, {
    id: cells.C1,
    code: 'C1',
    name: 'North',
    linedAreaM2: '36000',
    openedOn: '2011-05-02',
    evidence: 'as-built drawing VH-11',
    areaReason: undefined,
    plots: [{ id: id(), name: 'Cap', areaM2: '36000', coverTypeId: cover('final-membrane') }],
  });
  await createCell(tx, context, deps, {
    id: cells.C2,
    code: 'C2',
    name: 'Middle',
    linedAreaM2: '47000',
    openedOn: '2016-08-15',
    evidence: 'as-built drawing VH-31',
    areaReason: undefined,
    plots: [{ id: id(), name: 'Top and slopes', areaM2: '47000', coverTypeId: cover('intermediate-soil') }],
  });
  const openedOn = firstDay(addMonths(plan.firstMonth, 3));
  const [floor, face] = [id(), id()];
  await createCell(tx, context, deps, {
    id: cells.C3,
    code: 'C3',
    name: 'East',
    linedAreaM2: '42000',
    openedOn,
    evidence: 'survey at handover of the lining',
    areaReason: undefined,
    plots: [
      { id: floor, name: 'Floor', areaM2: '24000', coverTypeId: cover('lined-floor') },
      { id: face, name: 'Working face', areaM2: '18000', coverTypeId: cover('working-area') },
    ],
  });
  await coverHistory(tx, context, deps, plan, random, cover, { floor, face });
  for (const month of monthRange(addMonths(plan.firstMonth, 3), addMonths(plan.anchor, -1))) {
    await addWaste(tx, context, deps, {
      id: id(),
      cellId: cells.C3,
      month,
      massT: String(Math.round(random.between(3900, 5100))),
      bulkDensityTPerM3: '0.9',
      moistureFraction: '0.28',
      fieldCapacityFraction: '0.285',
      source: 'weighbridge',
    });
  }
  return { cells, openedOn };
}

/** A primary sump under each cell, and leak detection under the young one. */
async function makeSumps(
  tx: Transaction,
  context: Context,
  random: Random,
  cells: DemoIds['cells'],
): Promise<DemoIds['sumps']> {
  const id = random.id;
  const sumps = {} as DemoIds['sumps'];
  const offsets = {
    S1: ['0.45', '0.05'],
    S2: ['0.50', '0.05'],
    S3: ['0.60', '0.08'],
    L3: ['0.30', '0.05'],
  } as const;
  for (const [code, cell, area] of [
    ['S1', 'C1', '36000'],
    ['S2', 'C2', '47000'],
    ['S3', 'C3', '42000'],
    ['L3', 'C3', '42000'],
  ] as const) {
    const made = { sump: id(), place: id() };
    sumps[code] = made;
    const isLeak = code === 'L3';
    await createSump(tx, context, {
      id: made.sump,
      placeId: made.place,
      cellId: cells[cell],
      code,
      kind: isLeak ? 'leak-detection' : 'primary',
      areaServedM2: area,
      linerLowPointAboveFloorM: offsets[code][0],
      sensorAboveFloorM: offsets[code][1],
      headLimitM: isLeak ? undefined : '0.30',
      actionRateLPerHaDay: isLeak ? '187' : undefined,
    });
  }
  return sumps;
}

interface MadeSite {
  cells: DemoIds['cells'];
  sumps: DemoIds['sumps'];
  places: Omit<DemoIds['places'], 'header'>;
  openedOn: string;
}

/** The shared header, the pond, five meters and the tested pump. */
async function makeMetering(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  plan: DemoPlan,
  random: Random,
  made: MadeSite,
): Promise<Pick<DemoIds, 'pond' | 'meters' | 'pump' | 'places'>> {
  const id = random.id;
  const pond = { store: id(), place: id() };
  const strapping = rectangularPondTable(pondShape).map((row) => ({
    levelM: row.levelM.toFixed(3),
    volumeM3: row.volumeM3.toFixed(3),
    surfaceM2: row.surfaceM2.toFixed(3),
  }));
  const header = id();
  await createPlace(tx, context, { id: header, kind: 'header', name: 'Header H1' });
  await tx.insert(headerShares).values(
    (['C1', 'C2'] as const).map((code) => ({
      organisationId: context.organisationId,
      id: id(),
      placeId: header,
      cellId: made.cells[code],
      fromOn: '2016-08-15',
    })),
  );
  const meters = { H1: id(), S3: id(), L3: id(), P1: id(), O1: id() };
  await createStore(tx, context, deps, {
    id: pond.store,
    placeId: pond.place,
    code: 'P',
    name: 'Pond P',
    isCovered: false,
    linedAreaM2: '3400',
    crestLevelM: '3.45',
    operatingLevelM: '2.80',
    strapping,
  });
  await makeMeters(tx, context, deps, plan, { meters, header, pondPlace: pond.place, ...made });
  await tx.update(roundPoints).set({ everyDays: 7 }).where(eq(roundPoints.subjectId, meters.L3));
  const pump = id();
  await tx.insert(pumps).values({
    organisationId: context.organisationId,
    id: pump,
    sumpId: made.sumps.S3.sump,
    name: 'S3 pump',
    designRateLPerS: '5',
  });
  await tx.insert(pumpTests).values({
    organisationId: context.organisationId,
    id: id(),
    recordedById: context.personId,
    pumpId: pump,
    testedOn: addDays(plan.stuckFrom, -26),
    rateLPerS: '4.2',
  });
  return { pond, meters, pump, places: { header, ...made.places } };
}

async function makeMeters(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  plan: DemoPlan,
  {
    meters,
    header,
    pondPlace,
    sumps,
    places,
    openedOn,
  }: MadeSite & { meters: DemoIds['meters']; header: string; pondPlace: string },
): Promise<void> {
  const meter = { decimals: 0, installedOn: plan.start, multiplier: '1' };
  await createMeter(tx, context, deps, {
    ...meter,
    id: meters.H1,
    code: 'H1',
    name: 'North and Middle',
    fromPlaceId: header,
    toPlaceId: pondPlace,
    digits: 6,
    unit: 'm3',
    rateM3PerDayMax: '420',
  });
  await createMeter(tx, context, deps, {
    ...meter,
    id: meters.S3,
    code: 'S3',
    name: 'East sump',
    fromPlaceId: sumps.S3.place,
    toPlaceId: pondPlace,
    sumpId: sumps.S3.sump,
    digits: 6,
    unit: 'm3',
    rateM3PerDayMax: '380',
    installedOn: openedOn,
  });
  await createMeter(tx, context, deps, {
    ...meter,
    id: meters.L3,
    code: 'L3',
    name: 'leak detection',
    fromPlaceId: sumps.L3.place,
    toPlaceId: pondPlace,
    sumpId: sumps.L3.sump,
    digits: 6,
    unit: 'L',
    rateM3PerDayMax: '6',
    installedOn: openedOn,
  });
  await createMeter(tx, context, deps, {
    ...meter,
    id: meters.P1,
    code: 'P1',
    name: 'plant inflow',
    fromPlaceId: pondPlace,
    toPlaceId: places.treatment,
    digits: 7,
    unit: 'm3',
    rateM3PerDayMax: '260',
  });
  await createMeter(tx, context, deps, {
    ...meter,
    id: meters.O1,
    code: 'O1',
    name: 'outfall',
    fromPlaceId: places.treatment,
    toPlaceId: places.outfall,
    digits: 7,
    unit: 'm3',
    rateM3PerDayMax: '260',
  });
}

/** The young cell fills: floor becomes working area, slopes are covered, one part in the middle of a month. */
async function coverHistory(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  plan: DemoPlan,
  random: Random,
  cover: (kind: CoverKind) => string,
  first: { floor: string; face: string },
): Promise<void> {
  const id = random.id;
  const on = (months: number, day: number) => addDays(firstDay(addMonths(plan.firstMonth, months)), day - 1);
  const change = async (
    plotId: string,
    onDay: string,
    kind: CoverKind,
    areaM2: string,
    newPlotName: string,
    evidence: string,
  ) => {
    const made = { newPlotId: id(), restPlotId: id() };
    await changeCover(tx, context, deps, {
      plotId,
      onDay,
      coverTypeId: cover(kind),
      areaM2,
      newPlotName,
      evidence,
      initialSoilStoreMm: undefined,
      ...made,
    });
    return made;
  };
  const lift2 = await change(first.floor, on(8, 10), 'working-area', '12000', 'Lift 2', 'survey VH-24-09');
  const slope = await change(first.face, on(14, 18), 'daily-cover', '14000', 'Slope south', 'air photo');
  await change(slope.newPlotId, on(17, 12), 'intermediate-soil', '8000', 'South bench', 'survey and photo');
  await change(lift2.restPlotId, on(20, 3), 'working-area', '8000', 'Lift 3', 'survey VH-25-09');
}
