import { ChevronLeft, ChevronRight } from 'lucide-react';
import { useEffect, useRef } from 'react';
import { Link } from 'react-router';
import { addMonths, monthName, monthShortName } from '#shared/calendar/month.ts';
import type { StripMonth, StripView, TubeState } from '#shared/views/month-view.ts';
import { areaPath, type Area } from './paths.ts';

const tubes = [
  ['climate', 'var(--color-s-rain)'],
  ['meters', 'var(--color-s-pumped)'],
  ['lab', 'var(--color-s-effluent)'],
] as const;

const share = (tube: TubeState) =>
  tube.expectedCount === 0 ? 0 : Math.min(1, tube.receivedCount / tube.expectedCount);
const words = (name: string, tube: TubeState) =>
  tube.expectedCount === 0
    ? `${name} nothing expected`
    : tube.receivedCount >= tube.expectedCount
      ? `${name} complete`
      : `${name} ${tube.receivedCount} of ${tube.expectedCount}`;
const lidWords = { closed: 'closed', ajar: 'reopened', none: 'not closed' };

/** Three small glasses filled to the share of records that arrived; a lid when the month is closed, ajar when reopened. */
export function Glass({
  month,
  isFaint = false,
}: {
  month: Pick<StripMonth, 'climate' | 'meters' | 'lab' | 'lid'>;
  isFaint?: boolean;
}) {
  const height = 28;
  return (
    <svg aria-hidden width="44" height="40" viewBox="0 0 44 40" className="block">
      {tubes.map(([name, colour], index) => {
        const filled = height * share(month[name]);
        return (
          <g key={name} transform={`translate(${5 + index * 12} 9)`}>
            <rect
              width="9"
              height={height}
              fill="none"
              stroke={isFaint ? 'var(--color-line)' : 'var(--color-edge)'}
            />
            <rect y={height - filled} width="9" height={filled} fill={colour} />
          </g>
        );
      })}
      {month.lid !== 'none' && (
        <g transform={month.lid === 'ajar' ? 'rotate(-12 4 6)' : undefined} fill="var(--color-primary)">
          <rect x="2" y="4" width="40" height="3.5" />
          <rect x="18" y="1" width="8" height="3" />
        </g>
      )}
    </svg>
  );
}

function StripLink({
  row,
  isChosen,
  href,
  today,
}: {
  row: StripMonth;
  isChosen: boolean;
  href: string;
  today: string;
}) {
  const name = `${monthShortName(row.month)}${row.isRunning ? ` ${Number(today.slice(8))}` : ''}, ${monthName(row.month)}: ${words('climate', row.climate)}, ${words('meters', row.meters)}, ${words('lab', row.lab)}, ${lidWords[row.lid]}`;
  const look = isChosen
    ? 'border-2 border-primary bg-tint'
    : row.isFuture
      ? 'border border-dashed border-line'
      : 'border border-line bg-surface';
  return (
    <Link
      to={href}
      aria-label={name}
      aria-current={isChosen ? 'true' : undefined}
      className={`block w-[76px] h-[74px] px-1.5 pt-1 rounded-sm text-ink no-underline shrink-0 ${look}`}
    >
      <Glass month={row} isFaint={row.isFuture} />
      <span
        aria-hidden
        className={`flex justify-between text-sm leading-5 px-1 ${isChosen ? 'font-semibold' : row.isFuture ? 'text-muted' : ''}`}
      >
        {monthShortName(row.month)}{' '}
        {row.isRunning && <span className="text-muted font-normal">{Number(today.slice(8))}</span>}
      </span>
    </Link>
  );
}

interface MonthStripProps {
  strip: StripView;
  month: string;
  slug: string;
  area: Area;
}

/** The months of the reporting year across the top of every page: navigation, progress and readiness in one. */
export function MonthStrip({ strip, month, slug, area }: MonthStripProps) {
  const scroller = useRef<HTMLUListElement>(null);
  useEffect(() => {
    const chosen = scroller.current?.querySelector<HTMLElement>('[aria-current="true"]');
    if (scroller.current && chosen)
      scroller.current.scrollLeft = chosen.offsetLeft - scroller.current.clientWidth / 2 + 40;
  }, [month, strip.yearStart]);
  const target = area === 'site' || area === 'trail' || area === 'method' ? 'month' : area;
  const step = (count: number) => areaPath(slug, target, addMonths(month, count), strip.today);
  const stepClass = 'btn btn-second px-0 w-12 min-h-[74px] shrink-0 md:hidden';
  return (
    <nav aria-label="Month" className="flex items-center gap-1 min-w-0">
      <Link className={stepClass} to={step(-1)} aria-label="Previous month">
        <ChevronLeft aria-hidden />
      </Link>
      <ul ref={scroller} className="flex gap-1 overflow-x-auto min-w-0 p-1 list-none m-0 relative">
        {strip.months.map((row, index) => (
          <li key={row.month} className={index > 0 && index % 3 === 0 ? 'md:ml-2' : ''}>
            <StripLink
              row={row}
              isChosen={row.month === month}
              href={areaPath(slug, target, row.month, strip.today)}
              today={strip.today}
            />
          </li>
        ))}
      </ul>
      <Link className={stepClass} to={step(1)} aria-label="Next month">
        <ChevronRight aria-hidden />
      </Link>
    </nav>
  );
}
