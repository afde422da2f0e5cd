import type { ComparedRow } from '#shared/views/balance-view.ts';
import type { CoverShare } from '#shared/views/site-view.ts';
import { Marks, Running, Track, trackHeight } from '../../components/track.tsx';
import { hatchFill } from './hatches.tsx';

const middle = trackHeight / 2;

/** Share of the cell under each cover, as hatches side by side. */
export function CoverTrack({ covers, width = 66 }: { covers: readonly CoverShare[]; width?: number }) {
  const starts = covers.map((_, index) => covers.slice(0, index).reduce((sum, one) => sum + one.share, 0));
  return (
    <Track width={width}>
      {covers.map((cover, index) => (
        <rect
          key={cover.kind}
          x={starts[index]! * width}
          width={cover.share * width}
          height="100%"
          fill={hatchFill(cover.kind)}
          stroke="var(--color-edge)"
          strokeWidth="1"
        />
      ))}
    </Track>
  );
}

/** A bar from zero; dashed when the value is computed and not measured. */
export function BarTrack({
  value,
  max,
  colour,
  isDashed = false,
  width = 50,
}: {
  value: number;
  max: number;
  colour: string;
  isDashed?: boolean;
  width?: number;
}) {
  const length = max > 0 ? Math.max(0, (value / max) * width) : 0;
  return (
    <Track width={width}>
      <line x1="0.5" x2="0.5" y1="0" y2="100%" stroke="var(--color-line)" />
      <Marks>
        <rect
          x="1"
          y="-8"
          width={length}
          height="16"
          fill={isDashed ? 'none' : colour}
          stroke={colour}
          strokeWidth={isDashed ? 1.5 : 0}
          strokeDasharray={isDashed ? '3 3' : undefined}
        />
      </Marks>
    </Track>
  );
}

interface TrailPoint {
  before: number | null;
  value: number | null;
  after: number | null;
}

/** A line that runs down the page: from half way to the month before, to half way to the month after. */
function Segment({
  point,
  x,
  colour,
  dash,
}: {
  point: TrailPoint;
  x: (value: number) => number;
  colour: string;
  dash?: string;
}) {
  if (point.value === null) return null;
  const here = `${x(point.value)} ${middle}`;
  const half = (other: number) => (x(other) + x(point.value!)) / 2;
  const path = `${point.before === null ? `M${here}` : `M${half(point.before)} 0L${here}`}${point.after === null ? '' : `L${half(point.after)} ${trackHeight}`}`;
  return <path d={path} fill="none" stroke={colour} strokeWidth="2" strokeDasharray={dash} />;
}

const pointOf = (
  rows: readonly ComparedRow[],
  index: number,
  pick: (row: ComparedRow) => number | null,
): TrailPoint => {
  const at = (position: number) => (rows[position] ? pick(rows[position]) : null);
  return { before: at(index - 1), value: at(index), after: at(index + 1) };
};

export function StorageTrack({
  rows,
  index,
  min,
  max,
}: {
  rows: readonly ComparedRow[];
  index: number;
  min: number;
  max: number;
}) {
  const width = 62;
  const x = (value: number) => 6 + ((value - min) / (max - min || 1)) * (width - 12);
  const point = pointOf(rows, index, (row) => row.storageMm);
  const at = x(point.value!);
  return (
    <Track width={width}>
      <line x1="0.5" x2="0.5" y1="0" y2="100%" stroke="var(--color-line)" />
      <Running width={width}>
        <Segment point={point} x={x} colour="var(--color-s-storage)" dash="12 3 3 3" />
      </Running>
      <Marks>
        <path d={`M${at} -5l5 5-5 5-5-5z`} fill="var(--color-s-storage)" />
      </Marks>
    </Track>
  );
}

/** Predicted (dashed, hollow squares) beside pumped (solid, filled circles) on one scale. */
export function VolumeTrack({
  rows,
  index,
  max,
}: {
  rows: readonly ComparedRow[];
  index: number;
  max: number;
}) {
  const width = 150;
  const x = (value: number) => 8 + (value / (max || 1)) * (width - 16);
  const predicted = pointOf(rows, index, (row) => row.predictedM3);
  const measured = pointOf(rows, index, (row) => row.measuredM3);
  return (
    <Track width={width}>
      {[0, 0.25, 0.5, 0.75, 1].map((share) => (
        <line
          key={share}
          x1={x(share * max)}
          x2={x(share * max)}
          y1="0"
          y2="100%"
          stroke="var(--color-line)"
          strokeWidth={share === 0 ? 1.5 : 1}
        />
      ))}
      <Running width={width}>
        <Segment point={predicted} x={x} colour="var(--color-s-leachate)" dash="7 4" />
        <Segment point={measured} x={x} colour="var(--color-s-pumped)" />
      </Running>
      <Marks>
        <rect
          x={x(predicted.value!) - 5}
          y="-5"
          width="10"
          height="10"
          fill="#fff"
          stroke="var(--color-s-leachate)"
          strokeWidth="2"
        />
        {measured.value !== null && <circle cx={x(measured.value)} r="5.5" fill="var(--color-s-pumped)" />}
      </Marks>
    </Track>
  );
}

/** The signed difference; the grey ground is what lies inside the month's tolerance. */
export function GapTrack({ row, max }: { row: ComparedRow; max: number }) {
  const width = 80;
  const x = (value: number) => width / 2 + (value / (max || 1)) * (width / 2 - 2);
  const band = row.tolerance?.valueM3 ?? 0;
  const gap = row.differenceM3;
  return (
    <Track width={width}>
      <rect
        x={x(-Math.min(band, max))}
        width={x(Math.min(band, max)) - x(-Math.min(band, max))}
        height="100%"
        fill="var(--color-sunken)"
      />
      <line x1={width / 2} x2={width / 2} y1="0" y2="100%" stroke="var(--color-ink)" />
      {gap !== null && (
        <Marks>
          <rect
            x={Math.min(x(0), x(gap))}
            y="-8"
            width={Math.max(1, Math.abs(x(gap) - x(0)))}
            height="16"
            fill={row.isInside ? 'var(--color-edge)' : 'var(--color-ink)'}
          />
        </Marks>
      )}
    </Track>
  );
}
