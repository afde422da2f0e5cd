import type { Month } from '#shared/calendar/month.ts';
import { parameterTemplate, type BalanceParameters } from '#shared/water-balance/engine-input.ts';
import {
  PetMissing,
  recordHeatIndex,
  referencePetMm,
} from '#shared/water-balance/potential-evapotranspiration.ts';
import type { Transaction } from '../../db/transaction.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { findSite } from '../sites/site-repository.ts';
import { findCurrentParameterSet } from './balance-repository.ts';

/** Reference PET of a month by the site's current parameter set, mm; null when its climate is not there. */
export async function referencePetOfMonth(
  tx: Transaction,
  siteId: string,
  month: Month,
): Promise<number | null> {
  const site = await findSite(tx, siteId);
  const climate = (await listSiteClimate(tx, siteId)).flatMap((row) => (row.settled ? [row.settled] : []));
  const row = climate.find((one) => one.month === month);
  if (!site || !row) return null;
  const parameters =
    ((await findCurrentParameterSet(tx, siteId))?.values as BalanceParameters | undefined) ??
    parameterTemplate;
  try {
    return referencePetMm(row, Number(site.latitudeDeg), parameters, recordHeatIndex(climate));
  } catch (error) {
    if (error instanceof PetMissing) return null;
    throw error;
  }
}
