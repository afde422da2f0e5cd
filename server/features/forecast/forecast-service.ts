import type * as z from 'zod';
import { addDays, dayName, firstDay, lastDay } from '#shared/calendar/day.ts';
import { addMonths, daysInMonth, monthRange, type Month } from '#shared/calendar/month.ts';
import { counted } from '#shared/count-words.ts';
import { repeatLastYear, type ForecastTask } from '#shared/forecast/draw-members.ts';
import { yearStarts, type SourceClimate } from '#shared/forecast/member-weather.ts';
import { planScenario, PlanRefused, type PlannedChange } from '#shared/forecast/plan-scenario.ts';
import type { StorePlan } from '#shared/forecast/simulate-store.ts';
import { stormHeadroom } from '#shared/forecast/storm-headroom.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { forecastInput } from '#shared/schemas/forecast.ts';
import type {
  ForecastAbout,
  ForecastScenarioView,
  ForecastStartView,
  ForecastView,
} from '#shared/views/forecast-view.ts';
import type { GroundState } from '#shared/water-balance/compute-step.ts';
import type { EngineCell, EngineInput } from '#shared/water-balance/engine-input.ts';
import { recordPet } from '#shared/water-balance/month-forcing.ts';
import { PetMissing } from '#shared/water-balance/potential-evapotranspiration.ts';
import { planWaterBalance, runPlan } from '#shared/water-balance/run-water-balance.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { currentParameters, workingRun } from '../balance/run-service.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { sumEntriesByMonth } from '../ledger/entry-repository.ts';
import { listLevels } from '../readings/reading-repository.ts';
import { readSite, siteOf, type SiteRecord } from '../sites/site-service.ts';

type Input = z.output<typeof forecastInput>;

/** Where a forecast starts: the month after the last balanced one, and the water of the ground and the pack then. */
function startOf(input: EngineInput) {
  const { plan, months } = planWaterBalance(input);
  const grounds = runPlan(plan, () => undefined);
  const plots = input.cells.flatMap((cell) => cell.plots);
  const ran = new Set(plan.steps.map((step) => step.plot.id));
  return {
    firstMonth: addMonths(input.climate.at(-1)!.month, 1),
    packMm: months.at(-1)!.snow.packMm,
    grounds: Object.fromEntries(
      plots.flatMap((plot, index) => (ran.has(plot.id) ? [[plot.id, grounds[index]!]] : [])),
    ) as Record<string, GroundState>,
  };
}

/** The site's whole climate record up to its first gap, with PET by the method in force. */
async function sourceOf(tx: Transaction, siteId: string, input: EngineInput): Promise<SourceClimate> {
  const climate = (await listSiteClimate(tx, siteId)).flatMap((row) => (row.settled ? [row.settled] : []));
  const pet = recordPet({ ...input, climate });
  return {
    months: climate.map((row) => row.month),
    precipitationMm: climate.map((row) => row.precipitationMm),
    tMeanC: climate.map((row) => row.tMeanC),
    petMm: pet.map((month) => month.petMm),
  };
}

const strapping = (record: SiteRecord, storeId: string) =>
  record.storeLevels
    .filter((row) => row.storeId === storeId)
    .map((row) => ({
      levelM: Number(row.levelM),
      volumeM3: Number(row.volumeM3),
      surfaceM2: Number(row.surfaceM2),
    }));

/** The chosen store, from the last level read before the forecast begins; the first one after where there is none. */
async function storeOf(
  tx: Transaction,
  deps: Dependencies,
  record: SiteRecord,
  input: Input,
  firstMonth: Month,
) {
  const store = record.stores.find((one) => one.id === input.storeId);
  if (!store) {
    if (input.storeId) throw fieldProblem('/storeId', 'Choose a store of this site.');
    return null;
  }
  const levels = await listLevels(tx, { storeIds: [store.id] }, '0001-01-01', deps.now().toISOString());
  const level = levels.findLast((one) => one.siteDay <= firstDay(firstMonth)) ?? levels[0];
  if (!level)
    throw fieldProblem('/storeId', `No level of ${store.code} was read yet. Read it on the Round first.`);
  const plan: StorePlan = {
    points: strapping(record, store.id),
    startLevelM: Number(level.levelM),
    operatingLevelM: Number(store.operatingLevelM),
    crestLevelM: Number(store.crestLevelM),
    linedAreaM2: Number(store.linedAreaM2),
    evaporationFactor: Number(store.evaporationFactor),
    isCovered: store.isCovered,
    plantM3PerDay: Number(input.plantM3PerDay),
    loadM3: Number(input.loadM3),
    loadsPerDayMax: Number(input.loadsPerDayMax),
  };
  const name = record.places.find((place) => place.id === store.placeId)?.name ?? store.code;
  return { store: { ...store, name }, plan, level };
}

/** Working area and lined floor whose water goes to leachate, m²: what a storm falls on beside the store. */
const openAreaM2 = ({ cells, covers }: EngineInput): number =>
  cells
    .flatMap((cell) => cell.plots)
    .filter((plot) => {
      const { kind, runoffDestination } = covers[plot.periods.at(-1)!.coverTypeId]!;
      return (
        plot.toOn === null &&
        (kind === 'working-area' || kind === 'lined-floor') &&
        runoffDestination === 'leachate'
      );
    })
    .reduce((sum, plot) => sum + plot.areaM2, 0);

function scenarioView(
  record: SiteRecord,
  input: EngineInput,
  name: string,
  changes: readonly PlannedChange[],
  cells: readonly EngineCell[],
): ForecastScenarioView {
  const areas = new Map<string, { cellCode: string; coverName: string; areaHa: number }>();
  for (const cell of cells)
    for (const plot of cell.plots.filter((one) => one.toOn === null)) {
      const coverName = input.covers[plot.periods.at(-1)!.coverTypeId]!.name;
      const key = `${cell.code} ${coverName}`;
      const known = areas.get(key) ?? { cellCode: cell.code, coverName, areaHa: 0 };
      areas.set(key, { ...known, areaHa: known.areaHa + plot.areaM2 / 10_000 });
    }
  const hectares = (areaM2: number) => `${(areaM2 / 10_000).toFixed(1)} ha`;
  return {
    name,
    changes: changes.map((change) => {
      const cover = input.covers[change.coverTypeId]!.name;
      if (change.kind === 'cell')
        return {
          onDay: change.onDay,
          sentence: `cell ${change.code} opens with ${hectares(change.areaM2)} of ${cover}`,
        };
      const plot = record.plots.find((one) => one.id === change.plotId);
      const cell = record.cells.find((one) => one.id === plot?.cellId);
      return {
        onDay: change.onDay,
        sentence: `${hectares(change.areaM2)} of ${cell?.code} ${plot?.name} become ${cover}`,
      };
    }),
    endAreas: [...areas.values()].sort((a, b) =>
      `${a.cellCode} ${a.coverName}` < `${b.cellCode} ${b.coverName}` ? -1 : 1,
    ),
  };
}

function plannedCells(
  input: EngineInput,
  firstMonth: Month,
  scenario: Input['scenarios'][number],
  index: number,
) {
  const changes = scenario.changes.map((change): PlannedChange => ({
    ...change,
    areaM2: Number(change.areaM2),
  }));
  const early = changes.findIndex((change) => change.onDay <= firstDay(firstMonth));
  if (early >= 0)
    throw fieldProblem(
      `/scenarios/${index}/changes/${early}/onDay`,
      `A plan begins after ${dayName(firstDay(firstMonth))}. What was covered before belongs into the record, under Site.`,
    );
  try {
    return { changes, cells: planScenario(input, changes) };
  } catch (error) {
    if (error instanceof PlanRefused)
      throw fieldProblem(`/scenarios/${index}/changes/${error.changeIndex}/${error.field}`, error.message);
    throw error;
  }
}

const yearsForTrust = 10;

function cautionsOf(input: EngineInput, yearCount: number, hasStore: boolean): string[] {
  return [
    'For planning only. The ground starts as the working run leaves it; waste goes on as in the last twelve months.',
    ...(yearCount < yearsForTrust
      ? [
          `The draws know only ${counted(yearCount, 'climate year', 'climate years')}: the shading is too narrow. A longer series of a station nearby can be uploaded under Site, climate.`,
        ]
      : []),
    ...(input.parameters.runoffMethod === 'curve-number'
      ? ['Ahead uses the covers’ runoff shares; the curve number needs the days that are not known yet.']
      : []),
    ...(hasStore ? [] : ['No store was chosen: levels and loads are not computed.']),
  ];
}

/** Starts a forecast in the worker threads and answers at once. Nothing is written to the record. */
export async function startForecast(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: Input,
): Promise<{ id: string }> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const { input: base, run } = await workingRun(tx, context, deps, record);
  if (run.problem) throw new Problem('balance-refused', `There is no balance to start from. ${run.problem}`);
  const { firstMonth, packMm, grounds } = startOf(base);
  const source = await sourceOf(tx, siteId, base).catch((error: unknown) => {
    if (error instanceof PetMissing) throw new Problem('balance-refused', error.message);
    throw error;
  });
  const yearCount = yearStarts(source, firstMonth).length;
  if (yearCount === 0)
    throw new Problem(
      'balance-refused',
      'The climate record holds no whole year to draw from. Upload a longer series under Site, climate.',
    );
  const chosen = await storeOf(tx, deps, record, input, firstMonth);
  const planned = input.scenarios.map((scenario, index) => ({
    name: scenario.name,
    ...plannedCells(base, firstMonth, scenario, index),
  }));
  const number = (range: { low: string; high: string }) => ({
    low: Number(range.low),
    high: Number(range.high),
  });
  const tasks = planned.map(({ cells }): ForecastTask => ({
    input: { ...base, climate: [], cells: repeatLastYear(cells, firstMonth, input.monthCount) },
    source,
    firstMonth,
    monthCount: input.monthCount,
    grounds,
    packMm,
    ranges: {
      runoffFactor: number(input.ranges.runoffFactor),
      petFactor: number(input.ranges.petFactor),
      recessionPerMonth: number(input.ranges.recessionPerMonth),
      channelledFraction: number(input.ranges.channelledFraction),
    },
    store: chosen?.plan ?? null,
    seed: input.seed,
  }));
  const set = await currentParameters(tx, context, deps);
  const about: ForecastAbout = {
    firstMonth,
    monthCount: input.monthCount,
    memberCount: input.memberCount,
    seed: input.seed,
    yearCount,
    sourceFirst: source.months[0]!,
    sourceLast: source.months.at(-1)!,
    scenarios: planned.map(({ name, changes, cells }) => scenarioView(record, base, name, changes, cells)),
    store: chosen && storeAbout(chosen),
    storm: chosen && stormAbout(chosen.plan, input),
    parameterSet: { name: set.name, version: set.version },
    cautions: cautionsOf(base, yearCount, chosen !== null),
  };
  deps.forecasts.start(
    { id: input.id, organisationId: context.organisationId, siteId, about },
    tasks,
    input.memberCount,
  );
  return { id: input.id };
}

function storeAbout({ store, plan, level }: NonNullable<Awaited<ReturnType<typeof storeOf>>>) {
  return {
    code: store.code,
    name: store.name,
    startLevelM: plan.startLevelM,
    startedOn: level.siteDay,
    operatingLevelM: plan.operatingLevelM,
    crestLevelM: Number(store.crestLevelM),
    plantM3PerDay: plan.plantM3PerDay,
    loadM3: plan.loadM3,
    loadsPerDayMax: plan.loadsPerDayMax,
  };
}

function stormAbout(plan: StorePlan, input: Input): ForecastAbout['storm'] {
  const [stormMm, share, open] = [Number(input.stormMm), Number(input.stormShare), Number(input.stormAreaM2)];
  const found = stormHeadroom({
    stormMm,
    contributing: [
      { areaM2: open, share },
      { areaM2: plan.isCovered ? 0 : plan.linedAreaM2, share: 1 },
    ],
    levelM: plan.startLevelM,
    limitM: plan.operatingLevelM,
    points: plan.points,
    loadM3: plan.loadM3,
  });
  return found && { ...found, stormMm, share, openAreaM2: open };
}

/** How a forecast stands, with its numbers once every scenario is done. */
export function readForecast(context: Context, deps: Dependencies, id: string): ForecastView {
  const job = deps.forecasts.find(context.organisationId, siteOf(context), id);
  if (!job)
    throw new Problem(
      'not-found',
      'This forecast is no longer kept. Run it again: the same seed gives the same numbers.',
    );
  const { state, doneCount, wantedCount, failure } = job;
  return {
    id,
    state,
    doneCount,
    wantedCount,
    failure,
    about: job.about as ForecastAbout,
    summaries: state === 'done' ? job.summaries : [],
  };
}

export function cancelForecast(context: Context, deps: Dependencies, id: string): { id: string } {
  const job = deps.forecasts.find(context.organisationId, siteOf(context), id);
  if (!job) throw new Problem('not-found', 'This forecast is no longer kept.');
  deps.forecasts.cancel(job);
  return { id };
}

/** What the page offers before a forecast runs. */
export async function readForecastStart(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
): Promise<ForecastStartView> {
  const siteId = siteOf(context);
  const record = await readSite(tx, siteId);
  const { input } = await workingRun(tx, context, deps, record);
  const lastMonth = input.climate.at(-1)!.month;
  const year = monthRange(addMonths(lastMonth, -11), lastMonth);
  const storePlaces = new Set(record.stores.map((store) => store.placeId));
  const left = (await sumEntriesByMonth(tx, siteId, firstDay(year[0]!), lastDay(lastMonth))).filter((row) =>
    storePlaces.has(row.fromPlaceId),
  );
  const dayCount = year.reduce((sum, month) => sum + daysInMonth(month), 0);
  const { runoffFactor, petFactor, recessionPerMonth, channelledFraction } = input.parameters;
  return {
    firstMonth: addMonths(lastMonth, 1),
    parameters: { runoffFactor, petFactor, recessionPerMonth, channelledFraction },
    openAreaM2: openAreaM2(input),
    treatedM3PerDay: left.length ? left.reduce((sum, row) => sum + Number(row.volumeM3), 0) / dayCount : null,
    plots: record.plots
      .filter((plot) => plot.toOn === null || plot.toOn > addDays(lastDay(lastMonth), 1))
      .map((plot) => ({
        id: plot.id,
        cellCode: record.cells.find((cell) => cell.id === plot.cellId)?.code ?? '',
        name: plot.name,
        areaM2: plot.areaM2,
        coverName:
          record.coverTypes.find(
            (type) =>
              type.id === record.coverPeriods.filter((one) => one.plotId === plot.id).at(-1)?.coverTypeId,
          )?.name ?? '',
      })),
    coverTypes: record.coverTypes.map((type) => ({ id: type.id, name: type.name })),
    stores: record.stores.map((store) => ({
      id: store.id,
      code: store.code,
      name: record.places.find((place) => place.id === store.placeId)?.name ?? '',
    })),
  };
}
