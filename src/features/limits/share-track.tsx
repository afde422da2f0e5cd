import type { LimitsView } from '#shared/views/lab-view.ts';
import { formatNumber } from '../../lib/format-quantity.ts';

const width = 300;
const limitX = 230;
/** Values far above the limit are drawn at the edge, with their number. */
const shareMax = 1.28;

/** Every judged day as a share of its own limit; a hollow mark on a dotted line is below detection. */
export function ShareTrack({ verdict }: { verdict: LimitsView['verdicts'][number]['verdict'] }) {
  const marks = verdict.days.filter((day) => day.share !== null);
  const x = (share: number) => 8 + Math.min(share, shareMax) * (limitX - 8);
  const top = verdict.share;
  return (
    <svg aria-hidden width={width} height="36" viewBox={`0 0 ${width} 36`} className="block">
      <line x1="8" x2={width - 4} y1="18" y2="18" stroke="var(--color-line)" />
      <line x1="8" x2="8" y1="13" y2="23" stroke="var(--color-edge)" />
      <line x1={limitX} x2={limitX} y1="0" y2="36" stroke="var(--color-s-limit)" strokeWidth="2" />
      {marks.map((day) => (
        <g key={day.siteDay}>
          {day.isBelow && (
            <line
              x1="8"
              x2={x(day.share!)}
              y1="18"
              y2="18"
              stroke="var(--color-s-effluent)"
              strokeDasharray="2 3"
            />
          )}
          <rect
            x={x(day.share!) - 5}
            y="13"
            width="10"
            height="10"
            fill={day.isBelow ? '#fff' : 'var(--color-s-effluent)'}
            stroke="var(--color-s-effluent)"
            strokeWidth="2"
          />
        </g>
      ))}
      {top !== null && (
        <text
          x={Math.max(30, x(top) - 12)}
          y="10"
          textAnchor="end"
          fontSize="13"
          fontWeight="600"
          fill="var(--color-ink)"
        >
          {formatNumber(top, 2)}
        </text>
      )}
    </svg>
  );
}
