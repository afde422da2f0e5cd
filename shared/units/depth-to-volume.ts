/**
 * Volume of water standing on an area.
 *
 * @param depthMm water depth, mm; negative when water left
 * @param areaM2 plan area, m², > 0
 * @returns volume, m³ (1 mm on 1 m² is 0.001 m³)
 * @throws RangeError when the area is not positive
 * @source unit definition; no empirical factor
 * @example depthToVolumeM3({ depthMm: 25, areaM2: 40_000 }) // 1000
 */
export function depthToVolumeM3({ depthMm, areaM2 }: { depthMm: number; areaM2: number }): number {
  if (!(areaM2 > 0)) throw new RangeError('The area must be more than 0 m².');
  return (depthMm * areaM2) / 1000;
}
