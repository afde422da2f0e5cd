/** A row of a strapping table: volume and water surface at a level. */
export interface StrappingPoint {
  levelM: number;
  volumeM3: number;
  surfaceM2: number;
}

/**
 * Volume and surface of a store at a level, straight between the rows of its strapping table.
 * @param points at least two rows with rising levels
 * @returns null when the level lies outside the table
 */
export function storeAtLevel(
  points: readonly StrappingPoint[],
  levelM: number,
): { volumeM3: number; surfaceM2: number } | null {
  const above = points.findIndex((point) => point.levelM >= levelM);
  if (above < 0) return null;
  const high = points[above]!;
  if (high.levelM === levelM) return { volumeM3: high.volumeM3, surfaceM2: high.surfaceM2 };
  const low = points[above - 1];
  if (!low) return null;
  const share = (levelM - low.levelM) / (high.levelM - low.levelM);
  const between = (from: number, to: number) => from + (to - from) * share;
  return {
    volumeM3: between(low.volumeM3, high.volumeM3),
    surfaceM2: between(low.surfaceM2, high.surfaceM2),
  };
}

/** Strapping rows of a rectangular pond with equal side slopes: V = h(WL + sh(W+L) + 4/3 s²h²) over its bottom. */
export function rectangularPondTable(pond: {
  bottomWidthM: number;
  bottomLengthM: number;
  sideSlope: number;
  depthM: number;
  rowCount: number;
}): StrappingPoint[] {
  const { bottomWidthM: w, bottomLengthM: l, sideSlope: s, depthM, rowCount } = pond;
  return Array.from({ length: rowCount }, (_, index) => {
    const h = (depthM * index) / (rowCount - 1);
    return {
      levelM: h,
      volumeM3: h * (w * l + s * h * (w + l) + (4 / 3) * s * s * h * h),
      surfaceM2: (w + 2 * s * h) * (l + 2 * s * h),
    };
  });
}
