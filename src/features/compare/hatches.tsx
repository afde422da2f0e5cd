import type { CoverKind } from '#shared/water-balance/cover-types.ts';

/** Lines of each cover's hatch on an 8 px tile; a cover is told by its hatch, never by colour. */
const tiles: Record<CoverKind, string> = {
  'lined-floor': '',
  'working-area': 'M0 8 8 0M-2 2 2 -2M6 10 10 6',
  'daily-cover': 'M0 0 8 8M-2 6 2 10M6 -2 10 2',
  'intermediate-soil': 'M2 2h1M6 6h1',
  'intermediate-membrane': 'M0 4h8',
  'final-soil': 'M0 2h3M4 6h3',
  'final-membrane': 'M4 0v8M0 4h8',
  'evapotranspiration-cover': 'M4 8V3M4 5 2 3M4 5 6 3',
};

export const hatchFill = (kind: CoverKind): string =>
  kind === 'lined-floor' ? '#fff' : `url(#hatch-${kind})`;

/** The hatches of the page, once. */
export function HatchDefs() {
  return (
    <svg aria-hidden width="0" height="0" className="absolute">
      <defs>
        {Object.entries(tiles).map(([kind, path]) => (
          <pattern key={kind} id={`hatch-${kind}`} width="8" height="8" patternUnits="userSpaceOnUse">
            <rect width="8" height="8" fill="#fff" />
            <path d={path} stroke="var(--color-muted)" strokeWidth="1.4" fill="none" />
          </pattern>
        ))}
      </defs>
    </svg>
  );
}
