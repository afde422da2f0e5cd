import type { ForecastSummary, Spread } from '#shared/forecast/summarise-members.ts';
import { Marks, Running, Track, trackHeight } from '../../components/track.tsx';

const middle = trackHeight / 2;

interface TrackProps {
  spreads: readonly Spread[];
  index: number;
  width: number;
  min: number;
  max: number;
  colour: string;
  /** A level that should not be passed. */
  limit?: number;
}

/** One month of a band from low to high with the middle dashed on it: from half way before to half way after. */
export function SpreadTrack({ spreads, index, width, min, max, colour, limit }: TrackProps) {
  const x = (value: number) => 8 + ((value - min) / (max - min || 1)) * (width - 16);
  const here = spreads[index]!;
  const half = (other: Spread | undefined, end: keyof Spread) =>
    other ? (x(other[end]) + x(here[end])) / 2 : null;
  const [before, after] = [spreads[index - 1], spreads[index + 1]];
  const edge = (end: keyof Spread) =>
    [
      [half(before, end), 0],
      [x(here[end]), middle],
      [half(after, end), trackHeight],
    ].filter((point): point is [number, number] => point[0] !== null);
  const points = (list: [number, number][]) => list.map((point) => point.join(',')).join(' ');
  return (
    <Track width={width}>
      <Running width={width}>
        <polygon points={points([...edge('low'), ...edge('high').reverse()])} fill={colour} opacity="0.2" />
        <polyline
          points={points(edge('middle'))}
          fill="none"
          stroke={colour}
          strokeWidth="2"
          strokeDasharray="7 4"
        />
      </Running>
      {limit !== undefined && (
        <line x1={x(limit)} x2={x(limit)} y1="0" y2="100%" stroke="var(--color-s-limit)" strokeWidth="2" />
      )}
      <Marks>
        <rect
          x={x(here.middle) - 4}
          y="-4"
          width="8"
          height="8"
          fill="#fff"
          stroke={colour}
          strokeWidth="2"
        />
      </Marks>
    </Track>
  );
}

export const largest = (
  summaries: readonly ForecastSummary[],
  pick: (month: ForecastSummary['months'][number]) => number,
) => Math.max(0, ...summaries.flatMap((summary) => summary.months.map(pick)));
