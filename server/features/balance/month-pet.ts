import type { Month } from '#shared/calendar/month.ts';
import { completeParameters, type BalanceParameters } from '#shared/water-balance/engine-input.ts';
import {
  PetMissing,
  recordHeatIndex,
  referencePet,
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
  const parameters = completeParameters(
    ((await findCurrentParameterSet(tx, siteId))?.values ?? {}) as Partial<BalanceParameters>,
  );
  const index = climate.indexOf(row);
  try {
    const { petMm } = referencePet(
      row,
      {
        latitudeDeg: Number(site.latitudeDeg),
        elevationM: Number(site.elevationM),
        heatIndex: recordHeatIndex(climate),
      },
      parameters,
      { before: climate[index - 1], after: climate[index + 1] },
    );
    return petMm * parameters.petFactor;
  } catch (error) {
    if (error instanceof PetMissing) return null;
    throw error;
  }
}
