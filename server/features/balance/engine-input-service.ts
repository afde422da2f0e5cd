import { dayName, monthOfDay } from '#shared/calendar/day.ts';
import { monthName, type Month } from '#shared/calendar/month.ts';
import { Problem } from '#shared/problems.ts';
import { headOnLinerM } from '#shared/ledger/leak-detection.ts';
import { placedWasteDeficitM3 } from '#shared/water-balance/waste-store.ts';
import type { BalanceParameters, EngineCell, EngineInput } from '#shared/water-balance/engine-input.ts';
import type { Transaction } from '../../db/transaction.ts';
import { listSiteClimate, type SiteMonthClimate } from '../climate/climate-service.ts';
import { listCondensate, listReturns, listSumpLevels } from '../ledger/entry-repository.ts';
import type { SiteRecord } from '../sites/site-service.ts';
import { engineCover } from './engine-cover.ts';

interface SumpReadings {
  condensate: Awaited<ReturnType<typeof listCondensate>>;
  levels: Awaited<ReturnType<typeof listSumpLevels>>;
}

const number = (text: string | null) => (text === null ? null : Number(text));

/** Volumes of condensate and mean heads of a cell by month, from what its primary sumps were read at. */
function sumpMonths(record: SiteRecord, cellId: string, readings: SumpReadings) {
  const sumps = record.sumps.filter((sump) => sump.cellId === cellId && sump.kind === 'primary');
  const condensateM3: Record<Month, number> = {};
  for (const row of readings.condensate)
    if (row.kind === 'condensate-to-layer' && sumps.some((sump) => sump.id === row.sumpId))
      condensateM3[row.month] = (condensateM3[row.month] ?? 0) + Number(row.volumeM3);
  const heads = new Map<Month, number[]>();
  for (const row of readings.levels) {
    const sump = sumps.find((one) => one.id === row.sumpId);
    if (!sump) continue;
    const headM = headOnLinerM({
      levelM: Number(row.levelM),
      sensorAboveFloorM: Number(sump.sensorAboveFloorM),
      linerLowPointAboveFloorM: Number(sump.linerLowPointAboveFloorM),
    });
    const month = monthOfDay(row.siteDay);
    heads.set(month, [...(heads.get(month) ?? []), headM]);
  }
  const measuredHeadM = Object.fromEntries(
    [...heads].map(([month, values]) => [
      month,
      values.reduce((sum, value) => sum + value, 0) / values.length,
    ]),
  );
  return { condensateM3, measuredHeadM };
}

function engineCells(
  record: SiteRecord,
  returns: Awaited<ReturnType<typeof listReturns>>,
  readings: SumpReadings,
): EngineCell[] {
  return record.cells.map((cell) => {
    const placedDeficitM3: Record<Month, number> = {};
    for (const row of record.wastePlaced.filter((one) => one.cellId === cell.id)) {
      placedDeficitM3[row.month] = placedWasteDeficitM3({
        massT: Number(row.massT),
        bulkDensityTPerM3: Number(row.bulkDensityTPerM3),
        moistureFraction: Number(row.moistureFraction),
        fieldCapacityFraction: Number(row.fieldCapacityFraction),
      });
    }
    const plots = record.plots
      .filter((plot) => plot.cellId === cell.id)
      .map((plot) => ({
        id: plot.id,
        parentId: plot.parentId,
        areaM2: Number(plot.areaM2),
        fromOn: plot.fromOn,
        toOn: plot.toOn,
        periods: record.coverPeriods
          .filter((period) => period.plotId === plot.id)
          .map((period) => ({
            coverTypeId: period.coverTypeId,
            fromOn: period.fromOn,
            toOn: period.toOn,
            initialSoilStoreMm: number(period.initialSoilStoreMm),
          })),
      }));
    return {
      id: cell.id,
      code: cell.code,
      initialWasteDeficitMm: Number(cell.initialWasteDeficitMm),
      initialWasteStoreMm: Number(cell.initialWasteStoreMm),
      plots,
      placedDeficitM3,
      returns: returns
        .filter((one) => one.cellId === cell.id)
        .map((one) => ({
          siteDay: one.siteDay,
          plotIds: one.plotIds as string[],
          isAtSurface: one.method === 'surface' || one.method === 'tanker-at-face',
          volumeM3: Number(one.volumeM3),
        })),
      ...sumpMonths(record, cell.id, readings),
    };
  });
}

/** Months that can be balanced: in order from the first, up to the first gap nobody has decided on. */
function balanceMonths(
  climate: SiteMonthClimate[],
  firstMonth: Month,
  currentMonth: Month,
): { months: SiteMonthClimate[]; stopped: string | null } {
  const months: SiteMonthClimate[] = [];
  for (const row of climate) {
    if (row.month < firstMonth || row.month >= currentMonth) continue;
    if (!row.settled) {
      const missing = row.dayCount - Math.min(row.rainDayCount, row.temperatureDayCount);
      const stopped =
        row.choice === 'leave-out'
          ? `${monthName(row.month)} is left out, so the balance ends before it.`
          : `${monthName(row.month)} has ${missing} ${missing === 1 ? 'day' : 'days'} without climate. Decide what to do about it under Site, climate.`;
      return { months, stopped };
    }
    months.push(row);
  }
  return { months, stopped: null };
}

/**
 * The engine's input as the record stands now.
 * @returns the input, and a sentence when it ends before the last complete month
 * @throws Problem `balance-refused` when there is nothing to balance yet, naming what is missing
 */
export async function buildEngineInput(
  tx: Transaction,
  record: SiteRecord,
  parameters: BalanceParameters,
  today: string,
): Promise<{ input: EngineInput; climate: SiteMonthClimate[]; stopped: string | null }> {
  if (!record.plots.length)
    throw new Problem(
      'balance-refused',
      'There is no plot to balance yet. Make a cell with its plots under Site.',
    );
  const climate = await listSiteClimate(tx, record.site.id);
  const firstPlotOn = record.plots.map((plot) => plot.fromOn).sort()[0]!;
  const { months, stopped } = balanceMonths(climate, monthOfDay(firstPlotOn), monthOfDay(today));
  if (!months.length)
    throw new Problem(
      'balance-refused',
      stopped ??
        `There is no complete month of climate since ${dayName(firstPlotOn)}. Upload a climate record under Site.`,
    );
  const returns = await listReturns(tx, record.site.id, '0001-01-01', '9999-12-31');
  const sumpIds = record.sumps.map((sump) => sump.id);
  const readings = {
    condensate: await listCondensate(tx, sumpIds),
    levels: await listSumpLevels(tx, sumpIds),
  };
  const covers = Object.fromEntries(record.coverTypes.map((type) => [type.id, engineCover(type)]));
  return {
    input: {
      latitudeDeg: Number(record.site.latitudeDeg),
      elevationM: Number(record.site.elevationM),
      climate: months.map(({ settled }) => ({
        month: settled!.month,
        precipitationMm: settled!.precipitationMm,
        tMeanC: settled!.tMeanC,
        tMinC: settled!.tMinC,
        tMaxC: settled!.tMaxC,
        petMm: settled!.petMm,
        panMm: settled!.panMm,
        windMPerS: settled!.windMPerS,
        relativeHumidityPercent: settled!.relativeHumidityPercent,
        sunshineHours: settled!.sunshineHours,
        days: settled!.days,
      })),
      covers,
      cells: engineCells(record, returns, readings),
      parameters,
    },
    climate,
    stopped,
  };
}
