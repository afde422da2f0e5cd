import { mmPerMegajoule } from './solar-geometry.ts';

/**
 * Reference evapotranspiration of a day, mm, from temperatures and extraterrestrial radiation.
 * @param radiationMjPerM2Day extraterrestrial radiation, MJ/m²·d
 * @throws RangeError when the minimum is above the maximum
 * @source Hargreaves & Samani 1985; FAO-56 eq. 52
 * @example hargreavesMmPerDay({ tMinC: 14.8, tMaxC: 26.6, radiationMjPerM2Day: 40.55 }) // 5.0
 */
export function hargreavesMmPerDay({
  tMinC,
  tMaxC,
  radiationMjPerM2Day,
}: {
  tMinC: number;
  tMaxC: number;
  radiationMjPerM2Day: number;
}): number {
  if (tMinC > tMaxC)
    throw new RangeError(`The minimum temperature (${tMinC} °C) is above the maximum (${tMaxC} °C).`);
  const meanC = (tMinC + tMaxC) / 2;
  return Math.max(
    0,
    0.0023 * (meanC + 17.8) * Math.sqrt(tMaxC - tMinC) * mmPerMegajoule * radiationMjPerM2Day,
  );
}
