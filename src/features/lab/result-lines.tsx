import { Link } from 'react-router';
import { dayName, dayNameShort } from '#shared/calendar/day.ts';
import type { LabResultView, LabView } from '#shared/views/lab-view.ts';
import { seriesLooks } from '#shared/charts/series.ts';
import { ScrollBox } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import { formatResult } from '../../lib/format-quantity.ts';

/** Results of one point and parameter over the months shown: filled measured, hollow below detection. */
export function ResultPicture({ results }: { results: readonly LabResultView[] }) {
  const drawn = results.filter((one) => one.value !== null).sort((a, b) => (a.siteDay < b.siteDay ? -1 : 1));
  if (drawn.length < 2) return null;
  const [width, height] = [640, 150];
  const day = (text: string) => Date.parse(text);
  const [from, to] = [day(drawn[0]!.siteDay), day(drawn.at(-1)!.siteDay)];
  const max = Math.max(...drawn.map((one) => Number(one.value))) || 1;
  const x = (one: LabResultView) => 12 + ((day(one.siteDay) - from) / (to - from || 1)) * (width - 24);
  const y = (one: LabResultView) => height - 26 - (Number(one.value) / max) * (height - 48);
  const { colour } = seriesLooks.effluent;
  const last = drawn.at(-1)!;
  return (
    <figure className="sheet pad">
      <svg
        role="img"
        aria-label={`${last.analyteName} at ${last.pointCode}: ${drawn.length} results from ${dayName(drawn[0]!.siteDay)} to ${dayName(last.siteDay)}, highest ${max} ${last.unit}. The table has every value.`}
        viewBox={`0 0 ${width} ${height}`}
        className="w-full"
      >
        <line x1="0" x2={width} y1={height - 26} y2={height - 26} stroke="var(--color-line)" />
        {drawn.map((one) => (
          <g key={one.id}>
            <line
              x1={x(one)}
              x2={x(one)}
              y1={height - 26}
              y2={y(one)}
              stroke={colour}
              strokeDasharray={one.comparator === '<' ? '2 3' : undefined}
            />
            <rect
              x={x(one) - 5}
              y={y(one) - 5}
              width="10"
              height="10"
              fill={one.comparator === '<' ? '#fff' : colour}
              stroke={colour}
              strokeWidth="2"
            />
          </g>
        ))}
        <text x="0" y="14" fontSize="14" fill="var(--color-muted)">
          {max} {last.unit}
        </text>
        <text x="0" y={height - 6} fontSize="14" fill="var(--color-muted)">
          {dayNameShort(drawn[0]!.siteDay)} {drawn[0]!.siteDay.slice(0, 4)}
        </text>
        <text x={width} y={height - 6} fontSize="14" textAnchor="end" fill="var(--color-muted)">
          {dayNameShort(last.siteDay)} {last.siteDay.slice(0, 4)}
        </text>
      </svg>
      <figcaption className="hint">
        Filled: measured. Hollow on a dotted line: below detection, drawn at its limit.
      </figcaption>
    </figure>
  );
}

interface ResultTableProps {
  results: LabView['results'];
  /** Where an upload opens; null for a reader without it. */
  checkPath: string;
}

export function ResultTable({ results, checkPath }: ResultTableProps) {
  if (!results.length) return <Empty>No result for this choice in the twelve months.</Empty>;
  return (
    <ScrollBox label="Results">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Results, latest first</caption>
        <thead>
          <tr>
            <th scope="col">Sampled</th>
            <th scope="col">Parameter, point</th>
            <th scope="col" className="r">
              Result
            </th>
            <th scope="col">Unit</th>
            <th scope="col">As the sheet says</th>
            <th scope="col">From</th>
          </tr>
        </thead>
        <tbody>
          {results.map((one) => (
            <tr key={one.id}>
              <th scope="row" className="whitespace-nowrap">
                {dayNameShort(one.siteDay)} {one.siteDay.slice(0, 4)}
              </th>
              <td>
                {one.analyteName}
                {one.fraction && <span className="hint"> {one.fraction}</span>}
                <span className="hint block">{one.pointCode}</span>
                {one.isRevision && <span className="hint block">revised by the laboratory</span>}
              </td>
              <td className="r font-medium">{formatResult(one)}</td>
              <td>{one.value === null ? '' : one.unit}</td>
              <td className="text-muted whitespace-nowrap">
                {one.rawText} {one.rawUnit}
                {one.qualifier ? ` ${one.qualifier}` : ''}
              </td>
              <td className="whitespace-nowrap">
                {one.importId ? (
                  <Link to={`${checkPath}/${one.importId}`}>
                    {one.sheet ? `${one.sheet}, ${one.cell}` : 'upload'}
                  </Link>
                ) : (
                  'entered'
                )}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}
