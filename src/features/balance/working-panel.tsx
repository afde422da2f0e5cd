import { dayNameShort } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import type { WorkingView } from '#shared/views/balance-view.ts';
import type { WorkingLine } from '#shared/water-balance/explain-step.ts';
import type { TermName } from '#shared/water-balance/terms.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { Viewed } from '../../components/state.tsx';
import { Template } from '../../components/words.tsx';
import { formatExponent, formatInstant, formatNumber } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';

/** Very small numbers, like conductivities, keep their power of ten. */
const formatWorking = ({ value, unit }: WorkingLine) =>
  value !== 0 && Math.abs(value) < 0.005
    ? formatExponent(value, 2)
    : formatNumber(value, unit === 'm³' ? 1 : unit === '' ? 3 : 2);

function Sheet({ stepId, term }: { stepId: string; term: TermName }) {
  const { site } = usePlace();
  const query = useRecord<WorkingView>(site.id, `/balance-steps/${stepId}/${term}`);
  return (
    <Viewed query={query}>
      {(view) => (
        <>
          <p className="hint mb-3">
            {view.title}, {view.plotName} ({view.coverName}), {monthName(view.month)}
            {view.fromOn.endsWith('-01') ? '' : ` from ${dayNameShort(view.fromOn)}`}
          </p>
          <table className="tbl tbl-tight">
            <caption className="sr-only">Working of {view.title}</caption>
            <thead>
              <tr>
                <th scope="col">Line</th>
                <th scope="col">What and how</th>
                <th scope="col" className="r">
                  Value
                </th>
              </tr>
            </thead>
            <tbody>
              {view.lines.map((line, index) => (
                <tr key={line.line} className={index === view.lines.length - 1 ? 'total bg-tint' : ''}>
                  <td>{line.line}</td>
                  <th scope="row">
                    {line.what} <span className="text-muted font-normal">{line.how}</span>
                    {line.withValues && <span className="block font-normal">= {line.withValues}</span>}
                    {line.source && <span className="hint block">{line.source}</span>}
                  </th>
                  <td className="r">
                    {formatWorking(line)} {line.unit}
                  </td>
                </tr>
              ))}
            </tbody>
          </table>
          {view.warnings.length > 0 && (
            <ul className="list-disc pl-5 mt-4 text-sm">
              {view.warnings.map((sentence) => (
                <li key={sentence}>{sentence}</li>
              ))}
            </ul>
          )}
          <dl className="grid grid-cols-[130px_1fr] gap-x-4 gap-y-1 mt-4 text-sm">
            <dt className="text-muted">Soil law</dt>
            <dd>{view.law}</dd>
            <dt className="text-muted">Potential ET</dt>
            <dd>{view.petMethod}</dd>
            <dt className="text-muted">Parameter set</dt>
            <dd>
              {view.parameterSet.name}, version {view.parameterSet.version}{' '}
              {!view.parameterSet.isConfirmed && <Template />}
            </dd>
            <dt className="text-muted">Run</dt>
            <dd>
              {view.run.kind === 'frozen' ? `frozen run ${view.run.number}` : 'working run'},{' '}
              {formatInstant(view.run.computedAt)}
            </dd>
            <dt className="text-muted">Engine</dt>
            <dd>version {view.run.engineVersion}</dd>
          </dl>
          <p className="mt-4">
            <button type="button" className="btn btn-second" onClick={() => window.print()}>
              Print this working
            </button>
          </p>
        </>
      )}
    </Viewed>
  );
}

/** The working of one number, as a sheet with numbered lines and sources. */
export function WorkingPanel({
  working,
  onClose,
}: {
  working: { stepId: string; term: TermName } | null;
  onClose: () => void;
}) {
  return (
    <Panel title="Working" isOpen={working !== null} onClose={onClose}>
      {working && <Sheet stepId={working.stepId} term={working.term} />}
    </Panel>
  );
}
