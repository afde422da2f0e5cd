/**
 * Leak-detection rate of a sump: volume removed / (actual days × area drained by that sump).
 * @returns L/ha·d and US gal/acre·d (1 gal/acre·d = 9.354 L/ha·d)
 * @throws RangeError when days or area are not positive
 * @source 40 CFR 264.302, method section 8
 */
export function leakDetectionRate({
  volumeM3,
  days,
  areaM2,
}: {
  volumeM3: number;
  days: number;
  areaM2: number;
}): { lPerHaDay: number; galPerAcreDay: number } {
  if (!(days > 0) || !(areaM2 > 0)) throw new RangeError('A rate needs a time and an area above zero.');
  const lPerHaDay = (volumeM3 * 1000) / days / (areaM2 / 10_000);
  return { lPerHaDay, galPerAcreDay: lPerHaDay / (3.785411784 / 0.40468564224) };
}

/**
 * Head on the liner from the level a sensor shows.
 * head = level + height of the sensor above the sump floor − height of the liner's low point above the sump floor, not below 0.
 * @source common practice; offsets as in published county reports (data dictionary, Sump)
 */
export function headOnLinerM({
  levelM,
  sensorAboveFloorM,
  linerLowPointAboveFloorM,
}: {
  levelM: number;
  sensorAboveFloorM: number;
  linerLowPointAboveFloorM: number;
}): number {
  return Math.max(0, levelM + sensorAboveFloorM - linerLowPointAboveFloorM);
}
