import type { LedgerView } from '#shared/views/month-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { formatM3, formatNumber, formatSigned } from '../../lib/format-quantity.ts';

type Store = LedgerView['stores'][number];

interface Band {
  name: string;
  basis: string;
  volumeM3: number;
  fill: string;
}

const width = 1000;
const boxLeft = 395;
const boxWidth = 150;
const top = 34;
const tall = 360;
const bandGap = 34;

const mainBasis = (bases: Record<string, number>) =>
  Object.entries(bases).sort((a, b) => Math.abs(b[1]) - Math.abs(a[1]))[0]?.[0] ?? '';

function bandsOf(view: LedgerView, store: Store): { into: Band[]; out: Band[] } {
  const { balance } = store;
  const flow = (one: LedgerView['flows'][number], name: string): Band => ({
    name,
    basis: mainBasis(one.bases),
    volumeM3: one.volumeM3,
    fill: 'var(--color-s-pumped)',
  });
  const into = view.flows.filter((one) => one.toPlaceId === store.placeId).map((one) => flow(one, one.from));
  const out = view.flows.filter((one) => one.fromPlaceId === store.placeId).map((one) => flow(one, one.to));
  if (balance && balance.rainM3 > 0)
    into.unshift({
      name: 'Rain on the store',
      basis: 'calculated',
      volumeM3: balance.rainM3,
      fill: 'url(#flow-rain)',
    });
  if (balance && balance.evaporationM3 > 0)
    out.push({
      name: 'Evaporated',
      basis: 'calculated',
      volumeM3: balance.evaporationM3,
      fill: 'url(#flow-evaporation)',
    });
  return { into: into.filter((band) => band.volumeM3 > 0), out: out.filter((band) => band.volumeM3 > 0) };
}

/** Labels spread so that two thin bands do not write over each other. */
function spread(heights: readonly number[]): number[] {
  let at = 0;
  return heights.map((height) => {
    const place = at;
    at += Math.max(height, bandGap) + 10;
    return place;
  });
}

function Side({
  bands,
  scale,
  side,
  startY,
}: {
  bands: readonly Band[];
  scale: number;
  side: 'in' | 'out';
  startY: number;
}) {
  const heights = bands.map((band) => Math.max(1, band.volumeM3 * scale));
  const places = spread(heights);
  return (
    <>
      {bands.map((band, index) => {
        const height = heights[index]!;
        const farY = top + places[index]!;
        const nearY = startY + heights.slice(0, index).reduce((sum, one) => sum + one, 0);
        const [farX, nearX, textX] = side === 'in' ? [245, boxLeft, 225] : [700, boxLeft + boxWidth, 712];
        const bend = (farX + nearX) / 2;
        const curve = `M${farX} ${farY}C${bend} ${farY} ${bend} ${nearY} ${nearX} ${nearY}V${nearY + height}C${bend} ${nearY + height} ${bend} ${farY + height} ${farX} ${farY + height}Z`;
        const numberAnchor = side === 'in' ? 'end' : 'start';
        return (
          <g key={band.name}>
            <path d={curve} fill={band.fill} stroke="var(--color-surface)" strokeWidth="0.5" />
            <line
              x1={farX}
              x2={farX}
              y1={farY}
              y2={farY + Math.max(height, 6)}
              stroke="var(--color-ink)"
              strokeWidth="2"
            />
            <text
              x={textX}
              y={farY + 14}
              textAnchor={numberAnchor}
              fontSize="15"
              fontWeight="600"
              fill="var(--color-ink)"
            >
              {formatM3(band.volumeM3)}
            </text>
            <text
              x={side === 'in' ? 0 : 775}
              y={farY + 10}
              fontSize="15"
              fontWeight="600"
              fill="var(--color-ink)"
            >
              {band.name}
            </text>
            <text x={side === 'in' ? 0 : 775} y={farY + 28} fontSize="14" fill="var(--color-muted)">
              {band.basis}
            </text>
          </g>
        );
      })}
    </>
  );
}

/** One store as its own account: opening and everything in on the left, closing and everything out on the right. */
export function FlowPicture({ view, store }: { view: LedgerView; store: Store }) {
  const { balance } = store;
  if (!balance) return null;
  const { into, out } = bandsOf(view, store);
  const left = balance.openingM3 + balance.inM3 + balance.rainM3;
  const right = balance.measuredClosingM3 + balance.outM3 + balance.evaporationM3;
  const scale = tall / Math.max(left, right, 1);
  const tallOf = (bands: readonly Band[]) =>
    bands.reduce((sum, band) => sum + Math.max(band.volumeM3 * scale, bandGap) + 10, 0);
  const height = Math.max(top + tall + 44, top + tallOf(into) + 20, top + tallOf(out) + 60);
  const bottom = top + tall;
  const half = boxWidth / 2;
  const box = (x: number, volumeM3: number, levelM: number | null, words: string) => (
    <>
      <rect
        x={x}
        y={bottom - volumeM3 * scale}
        width={half}
        height={volumeM3 * scale}
        fill="var(--color-s-storage)"
      />
      <text x={x + half / 2} y={bottom - 44} textAnchor="middle" fontSize="14" fill="#fff">
        <tspan x={x + half / 2} fontWeight="600">
          {words}
        </tspan>
        <tspan x={x + half / 2} dy="18" fontWeight="600">
          {formatM3(volumeM3)}
        </tspan>
        <tspan x={x + half / 2} dy="17">
          {levelM === null ? '' : `${formatNumber(levelM, 2)} m`}
        </tspan>
      </text>
    </>
  );
  const summary = `${store.name}: opening ${formatM3(balance.openingM3)}, in ${formatM3(balance.inM3 + balance.rainM3)}, out ${formatM3(balance.outM3 + balance.evaporationM3)}, closing ${formatM3(balance.measuredClosingM3)}, unaccounted ${formatSigned(balance.unaccountedM3)} m³, tolerance ±${formatM3(balance.toleranceM3)}.`;
  return (
    <figure>
      <ScrollBox label={`Picture of ${store.name}`}>
        <svg
          role="img"
          aria-label={summary}
          viewBox={`0 0 ${width} ${height}`}
          className="min-w-[760px] w-full block p-4"
        >
          <defs>
            <pattern id="flow-rain" width="8" height="8" patternUnits="userSpaceOnUse">
              <path d="M0 0 8 8M-2 6 2 10M6 -2 10 2" stroke="var(--color-s-rain)" strokeWidth="2" />
            </pattern>
            <pattern id="flow-evaporation" width="8" height="8" patternUnits="userSpaceOnUse">
              <path d="M0 8 8 0M-2 2 2 -2M6 10 10 6" stroke="var(--color-s-et)" strokeWidth="2" />
            </pattern>
          </defs>
          <Side bands={into} scale={scale} side="in" startY={bottom - left * scale} />
          <Side bands={out} scale={scale} side="out" startY={bottom - right * scale} />
          {box(boxLeft, balance.openingM3, store.openingLevelM, 'opening')}
          {box(boxLeft + half, balance.measuredClosingM3, store.closingLevelM, 'closing')}
          <path
            d={`M${boxLeft} ${top - 14}V${bottom}H${boxLeft + boxWidth}V${top - 14}M${boxLeft + half} ${top}V${bottom}`}
            fill="none"
            stroke="var(--color-ink)"
            strokeWidth="2"
          />
          <text
            x={boxLeft + half}
            y={bottom + 24}
            textAnchor="middle"
            fontSize="16"
            fontWeight="600"
            fill="var(--color-ink)"
          >
            {store.name}
          </text>
          <text x="775" y={height - 26} fontSize="15" fontWeight="600" fill="var(--color-ink)">
            Unaccounted {formatSigned(balance.unaccountedM3)}
          </text>
          <text x="775" y={height - 8} fontSize="14" fill="var(--color-muted)">
            tolerance ±{formatM3(balance.toleranceM3)}: {balance.isInside ? 'inside' : 'outside'}
          </text>
        </svg>
      </ScrollBox>
      <figcaption className="hint mt-2">
        Height is volume in m³, one scale for all. Opening and everything in on the left, closing and
        everything out on the right. Solid: metered or by ticket. Hatched: calculated. {store.weather}.
      </figcaption>
    </figure>
  );
}
