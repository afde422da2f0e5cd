import { useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router';
import { monthName } from '#shared/calendar/month.ts';
import { counted } from '#shared/count-words.ts';
import type { BalanceGroup, BalanceView } from '#shared/views/balance-view.ts';
import type { TermName } from '#shared/water-balance/terms.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, ScrollBox, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import {
  formatExponent,
  formatInstant,
  formatM3,
  formatMm,
  formatNumber,
} from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { RunsPanel } from './runs-panel.tsx';
import { WorkingPanel } from './working-panel.tsx';
import { HeadLine, SignedBars } from './head-line.tsx';
import { PlotTable } from './plot-table.tsx';

const lineWords: Record<string, string> = {
  snow: 'snowfall = melt + into snow',
  soil: 'rain + melt + returned + brought = runoff + evapotranspiration + into soil + percolation',
  cover: 'percolation = through the membrane + cover drain',
  waste: 'through the membrane + returned + free moisture = absorbed + into waste + drained',
  drain: 'drained + condensate = collected + leaked',
};

function sentenceOf(view: BalanceView, group: BalanceGroup): string {
  if (view.run.problem) return `The balance was refused. ${view.run.problem}`;
  const h = group.headLine;
  if (h.rainM3 === 0 && h.leachateM3 === 0) return 'Nothing fell and nothing drained.';
  if (h.intoStorageM3 < 0 && h.leachateM3 > 0)
    return 'Leachate came out of storage this month: the ground gave more than it took.';
  if (h.evapotranspirationM3 > h.rainM3 / 2) return 'Most of the rain of the month went back into the air.';
  if (h.intoStorageM3 > h.leachateM3)
    return 'Most of what stayed went into storage: soil and waste took up water.';
  return `${formatNumber((100 * h.leachateM3) / h.rainM3, 0)} % of the rain reached the sump.`;
}

/** How much the waste can still take up, and how long that lasts: a check, not a promise. */
function WasteCheck({ group }: { group: BalanceGroup }) {
  const deficitM3 = group.volumesM3.wasteDeficitMm;
  const deficitMm = (deficitM3 / group.areaM2) * 1000;
  if (deficitMm < 0.05) return null;
  const { passedYearM3 } = group;
  return (
    <p className="mt-4 max-w-[80ch]">
      The waste can still take up {formatM3(deficitM3)} m³ ({formatMm(deficitMm)} mm) before it is at field
      capacity.
      {passedYearM3 !== null &&
        passedYearM3 > 0 &&
        ` At what reached it in the last twelve months, ${formatM3(passedYearM3)} m³, that is ${formatNumber(deficitM3 / passedYearM3, 1)} years: a check, not a promise, because a part runs through channels and waste goes on being placed.`}
    </p>
  );
}

/** Where the rain of the month went, per site, cell and plot; every number opens its working. */
export function BalancePage() {
  const { month = '' } = useParams();
  const [search, setSearch] = useSearchParams();
  const { site } = usePlace();
  const runId = search.get('run');
  const cellCode = search.get('cell');
  const query = useRecord<BalanceView>(site.id, `/balance/${month}${runId ? `?run=${runId}` : ''}`);
  const [working, setWorking] = useState<{ stepId: string; term: TermName } | null>(null);
  const chooseCell = (code: string | null) =>
    setSearch((before) => {
      const next = new URLSearchParams(before);
      if (code) next.set('cell', code);
      else next.delete('cell');
      return next;
    });
  const view = query.data;
  const cell = view?.cells.find((one) => one.code === cellCode);
  const group = cell ?? view?.site;
  return (
    <>
      <PageHead
        title={`Balance, ${cell ? `${cell.code} ${cell.name}` : 'whole site'}, ${monthName(month)}`}
        sentence={
          view &&
          group &&
          (group.areaM2 > 0 || view.run.problem
            ? sentenceOf(view, group)
            : `The balance does not reach ${monthName(month)}. ${view.stopped ?? `It runs from ${monthName(view.firstMonth)} to ${monthName(view.lastMonth)}.`}`)
        }
        crumb={
          view && (
            <>
              {view.run.isWorking
                ? `Working run, follows its inputs, computed ${formatInstant(view.run.computedAt)}`
                : `Frozen run ${view.run.number}, ${formatInstant(view.run.computedAt)}${view.run.acceptedAt ? ', accepted' : ''}`}
              .{view.differsFromWorking && ' The working run differs from the newest frozen run.'}
            </>
          )
        }
      />
      <Viewed query={query}>
        {(data) => (
          <>
            <div className="flex flex-wrap gap-2 mb-5 no-print" role="group" aria-label="Part of the site">
              <button
                type="button"
                className="choice !w-auto"
                aria-pressed={!cell}
                onClick={() => chooseCell(null)}
              >
                Whole site
              </button>
              {data.cells.map((one) => (
                <button
                  key={one.code}
                  type="button"
                  className="choice !w-auto"
                  aria-pressed={cell?.code === one.code}
                  onClick={() => chooseCell(one.code)}
                >
                  {one.code} {one.name}
                </button>
              ))}
            </div>
            {data.run.problem && <p className="box box-error mb-5">{data.run.problem}</p>}
            {data.stopped && (
              <p className="box box-warn mb-5">
                The balance ends with {monthName(data.lastMonth)}. {data.stopped}{' '}
                <Link to={`/sites/${site.slug}/site#climate`}>Climate</Link>
              </p>
            )}
            {group && group.areaM2 > 0 && (
              <>
                <HeadLine group={group} />
                <Section title="Where the rain went">
                  <SignedBars group={group} />
                </Section>
                <Section title="By plot" aside="m³; any number opens its working">
                  <PlotTable
                    view={data}
                    cell={cell ?? null}
                    onOpen={(stepId, term) => setWorking({ stepId, term })}
                  />
                  <p className="hint mt-2">
                    Across: what comes in, less what goes away or into storage, is the leachate. Percolation
                    is on the way and not added. Rows may not add because of rounding.
                  </p>
                </Section>
                <WasteCheck group={group} />
                <Section title="Lines that must close" aside="largest left over of any plot and step, mm">
                  <ScrollBox label="Lines that must close">
                    <table className="tbl tbl-tight">
                      <caption className="sr-only">Lines that must close</caption>
                      <thead>
                        <tr>
                          <th scope="col">Line</th>
                          <th scope="col">What must be equal</th>
                          <th scope="col" className="r">
                            Left over, mm
                          </th>
                          <th scope="col" className="r">
                            Tolerance, mm
                          </th>
                        </tr>
                      </thead>
                      <tbody>
                        {data.closure.map((line) => (
                          <tr key={line.line}>
                            <th scope="row">{line.line}</th>
                            <td>{lineWords[line.line]}</td>
                            <td className="r">
                              {line.residualMm === 0 ? '0' : formatExponent(line.residualMm)}
                            </td>
                            <td className="r">{formatExponent(line.toleranceMm)}</td>
                          </tr>
                        ))}
                      </tbody>
                    </table>
                  </ScrollBox>
                </Section>
                {data.climate && (
                  <p className="hint mt-4">
                    Rain: {data.climate.rainStation ?? 'none'}, {data.climate.rainDayCount} of{' '}
                    {data.climate.dayCount} days. Temperature: {data.climate.temperatureStation ?? 'none'},{' '}
                    {data.climate.temperatureDayCount} of {data.climate.dayCount} days.
                    {data.climate.choice &&
                      ` Missing days: ${data.climate.choice.replaceAll('-', ' ')}.`}{' '}
                    Biochemical gain or loss of water is neglected.
                  </p>
                )}
                {data.run.warnings.length > 0 && (
                  <details className="mt-4">
                    <summary className="cursor-pointer font-medium">
                      {counted(data.run.warnings.length, 'warning', 'warnings')} of the run
                    </summary>
                    <ul className="list-disc pl-5">
                      {data.run.warnings.map((warning) => (
                        <li key={warning}>{warning}</li>
                      ))}
                    </ul>
                  </details>
                )}
              </>
            )}
            <RunsPanel view={data} />
            <WorkingPanel working={working} onClose={() => setWorking(null)} />
          </>
        )}
      </Viewed>
    </>
  );
}
