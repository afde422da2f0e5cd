import { dayNameShort } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import { seriesLooks } from '#shared/charts/series.ts';
import { causesWithoutEvent } from '#shared/reconciliation/double-mass.ts';
import type { CompareView } from '#shared/views/balance-view.ts';
import { formatM3 } from '../../lib/format-quantity.ts';

const [width, height, left, bottom] = [440, 350, 62, 44];

const niceStep = (max: number) => {
  const power = 10 ** Math.floor(Math.log10(max || 1));
  return [0.2, 0.5, 1, 2].map((one) => one * power).find((step) => max / step <= 6) ?? power * 2;
};

/** Pumped against predicted, both added up from the first month shown: a bend is a change of slope. */
export function MassPicture({ view }: { view: CompareView }) {
  const points = view.rows
    .filter((row) => row.measuredM3 !== null)
    .reduce<{ month: string; predicted: number; measured: number }[]>(
      (sums, row) => [
        ...sums,
        {
          month: row.month,
          predicted: (sums.at(-1)?.predicted ?? 0) + row.predictedM3,
          measured: (sums.at(-1)?.measured ?? 0) + row.measuredM3!,
        },
      ],
      [],
    );
  const last = points.at(-1);
  if (!last) return null;
  const step = niceStep(Math.max(last.predicted, last.measured));
  const max = Math.ceil(Math.max(last.predicted, last.measured) / step) * step;
  const x = (value: number) => left + (value / max) * (width - left - 16);
  const y = (value: number) => height - bottom - (value / max) * (height - bottom - 16);
  const ticks = Array.from({ length: Math.round(max / step) + 1 }, (_, index) => index * step);
  const { massBreak } = view;
  const bend = massBreak && points.filter((point) => point.month < massBreak.month).at(-1);
  const { colour } = seriesLooks.pumped;
  return (
    <svg
      role="img"
      viewBox={`0 0 ${width} ${height}`}
      className="w-full max-w-[640px]"
      aria-label={`Pumped against predicted, added up from ${monthName(view.rows[0]!.month)}: at the end ${formatM3(last.measured)} m³ against ${formatM3(last.predicted)}. ${massBreak ? `The slope changes in ${monthName(massBreak.month)} from ${massBreak.slopeBefore.toFixed(2)} to ${massBreak.slopeAfter.toFixed(2)}.` : 'No bend stands out.'} The table below has the numbers.`}
    >
      {ticks.map((tick) => (
        <g key={tick} fontSize="14" fill="var(--color-muted)">
          <line x1={x(0)} x2={x(max)} y1={y(tick)} y2={y(tick)} stroke="var(--color-line)" />
          <text x={left - 8} y={y(tick) + 5} textAnchor="end">
            {formatM3(tick)}
          </text>
          <text x={x(tick)} y={height - bottom + 20} textAnchor="middle">
            {tick === 0 ? '' : formatM3(tick)}
          </text>
        </g>
      ))}
      <line x1={x(0)} y1={y(0)} x2={x(max)} y2={y(max)} stroke="var(--color-muted)" />
      <text x={x(max) - 4} y={y(max) + 30} textAnchor="end" fontSize="14" fill="var(--color-muted)">
        equal
      </text>
      <polyline
        fill="none"
        stroke={colour}
        strokeWidth="2.5"
        points={[{ predicted: 0, measured: 0 }, ...points]
          .map((point) => `${x(point.predicted)},${y(point.measured)}`)
          .join(' ')}
      />
      {points.map((point) => (
        <circle key={point.month} cx={x(point.predicted)} cy={y(point.measured)} r="4" fill={colour} />
      ))}
      {bend && (
        <g fontSize="14">
          <line
            x1={x(bend.predicted)}
            x2={x(bend.predicted)}
            y1={y(0)}
            y2={y(bend.measured) - 24}
            stroke="var(--color-ink)"
            strokeDasharray="2 3"
          />
          <text x={x(bend.predicted) + 8} y={y(0) - 12} fontWeight="600">
            {monthName(massBreak.month)}
          </text>
        </g>
      )}
      <text x={width - 16} y={height - 4} textAnchor="end" fontSize="14" fill="var(--color-muted)">
        predicted, m³
      </text>
      <text x={left} y={12} fontSize="14" fill="var(--color-muted)">
        pumped, m³
      </text>
    </svg>
  );
}

/** What the bend may come from: dated evidence first. */
export function BreakCauses({ view }: { view: CompareView }) {
  const { massBreak } = view;
  if (!massBreak)
    return (
      <p className="text-muted">
        No change of slope by a tenth or more stands out in the last three years. Smaller ones are within what
        meters and model do by themselves.
      </p>
    );
  return (
    <ul className="sheet lines px-4 list-none">
      {massBreak.events.map((event) => (
        <li key={event.onDay + event.sentence}>
          <strong>
            {dayNameShort(event.onDay)} {event.onDay.slice(0, 4)}:
          </strong>{' '}
          {event.sentence}
        </li>
      ))}
      <li className={massBreak.events.length ? 'text-muted' : ''}>
        {massBreak.events.length ? 'If none of these: ' : 'No dated event is near. Possible: '}
        {causesWithoutEvent.join(', ')}.
      </li>
    </ul>
  );
}
