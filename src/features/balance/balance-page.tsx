import { useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router';
import { monthName } from '#shared/calendar/month.ts';
import { dayNameShort } from '#shared/calendar/day.ts';
import type { BalanceGroup, BalanceView } from '#shared/views/balance-view.ts';
import { termRegister, type TermName } from '#shared/water-balance/terms.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, ScrollBox, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import {
  formatHa,
  formatInstant,
  formatM3,
  formatMm,
  formatNumber,
  formatSigned,
  formatPercent,
} from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { RunsPanel } from './runs-panel.tsx';
import { WorkingPanel } from './working-panel.tsx';

interface Bar {
  name: string;
  valueM3: number;
  colour: string;
  isDashed?: boolean;
}

/** The terms of the head line in order; what is zero is left out of the line, never out of the table. */
function headTerms({ headLine: h }: BalanceGroup): (Bar & { sign: '+' | '−' | '=' })[] {
  const out = h.intoStorageM3 < 0;
  return [
    { sign: '+', name: 'Rain', valueM3: h.rainM3, colour: 'var(--color-s-rain)' },
    { sign: '+', name: 'Other water in', valueM3: h.otherInM3, colour: 'var(--color-s-rain)' },
    { sign: '−', name: 'Runoff away', valueM3: h.runoffM3, colour: 'var(--color-s-runoff)' },
    { sign: '−', name: 'Evapotranspiration', valueM3: h.evapotranspirationM3, colour: 'var(--color-s-et)' },
    {
      sign: out ? '+' : '−',
      name: out ? 'Out of storage' : 'Into storage',
      valueM3: Math.abs(h.intoStorageM3),
      colour: 'var(--color-s-storage)',
    },
    { sign: '−', name: 'Leaked', valueM3: h.leakedM3, colour: 'var(--color-s-limit)' },
  ];
}

function HeadLine({ group }: { group: BalanceGroup }) {
  const terms = headTerms(group).filter((term) => Math.abs(term.valueM3) > 1e-9);
  const gap = group.pumpedM3 === null ? null : group.pumpedM3 - group.headLine.leachateM3;
  return (
    <div className="sheet pad flex flex-wrap gap-x-5 gap-y-4 items-start">
      {terms.map((term, index) => (
        <span key={term.name} className="flex items-start gap-4">
          {(index > 0 || term.sign === '−') && (
            <span aria-hidden className="text-xl text-muted">
              {term.sign}
            </span>
          )}
          <span>
            <span className="sr-only">{term.sign === '−' ? 'minus ' : index > 0 ? 'plus ' : ''}</span>
            <span className="text-xl md:text-2xl block leading-tight">{formatM3(term.valueM3)}</span>
            <span className="hint">{term.name}</span>
          </span>
        </span>
      ))}
      <span className="flex items-start gap-4">
        <span aria-hidden className="text-xl text-muted">
          =
        </span>
        <span>
          <span className="sr-only">equals </span>
          <span className="text-xl md:text-2xl block leading-tight font-semibold">
            {formatM3(group.headLine.leachateM3)}
          </span>
          <span className="hint">Leachate at the sump, m³</span>
        </span>
      </span>
      <p className="md:ml-auto md:border-l border-line md:pl-5 max-w-[26ch]">
        {gap === null ? (
          <>
            <strong>Pumped:</strong> not read.
          </>
        ) : (
          <>
            <strong>Pumped {formatM3(group.pumpedM3!)}.</strong> Gap {formatSigned(gap)} m³
            {group.headLine.leachateM3 > 0
              ? ` (${formatPercent((100 * gap) / group.headLine.leachateM3)})`
              : ''}
            .
          </>
        )}
      </p>
    </div>
  );
}

/** Signed bars from one zero line: each term begins where the last one ended. */
function SignedBars({ group }: { group: BalanceGroup }) {
  const terms = headTerms(group);
  const signedOf = (term: (typeof terms)[number]) => (term.sign === '+' ? term.valueM3 : -term.valueM3);
  const bars = terms.map((term, index) => {
    const from = terms.slice(0, index).reduce((sum, one) => sum + signedOf(one), 0);
    return { ...term, from, to: from + signedOf(term) };
  });
  const ends = [
    ...bars.map((bar) => Math.max(bar.from, bar.to)),
    group.headLine.leachateM3,
    group.pumpedM3 ?? 0,
    1,
  ];
  const low = Math.min(0, ...bars.map((bar) => Math.min(bar.from, bar.to)));
  const scale = (value: number) => `${(100 * (value - low)) / (Math.max(...ends) - low)}%`;
  const rows = [
    ...bars.map((bar) => ({ ...bar, shown: bar.sign === '−' ? -bar.valueM3 : bar.valueM3 })),
    {
      name: 'Leachate, predicted',
      from: 0,
      to: group.headLine.leachateM3,
      colour: 'var(--color-s-leachate)',
      isDashed: true,
      shown: group.headLine.leachateM3,
    },
  ];
  if (group.pumpedM3 !== null)
    rows.push({
      name: 'Pumped, metered',
      from: 0,
      to: group.pumpedM3,
      colour: 'var(--color-s-pumped)',
      isDashed: false,
      shown: group.pumpedM3,
    });
  return (
    <ScrollBox label="Where the rain of the month went">
      <table className="tbl">
        <caption className="sr-only">Where the rain of the month went, m³ and mm</caption>
        <thead>
          <tr>
            <th scope="col">Term</th>
            <th scope="col" className="r">
              m³
            </th>
            <th scope="col" className="r">
              mm
            </th>
            <th scope="col" className="min-w-[180px] w-1/2">
              <span className="sr-only">Bar</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.name} className={row.isDashed ? 'total' : ''}>
              <th scope="row">{row.name}</th>
              <td className="r">{formatM3(row.shown)}</td>
              <td className="r">{group.areaM2 ? formatMm((row.shown / group.areaM2) * 1000) : '–'}</td>
              <td aria-hidden>
                <div className="h-5 border-l border-ink" style={{ marginLeft: scale(0) }} />
                <div className="relative h-5 -mt-5">
                  <div
                    className="absolute h-5"
                    style={{
                      left: scale(Math.min(row.from, row.to)),
                      width: `calc(${scale(Math.max(row.from, row.to))} - ${scale(Math.min(row.from, row.to))})`,
                      background: row.isDashed ? 'transparent' : row.colour,
                      border: row.isDashed ? '2px dashed var(--color-s-leachate)' : undefined,
                    }}
                  />
                </div>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

const plotTerms: TermName[] = [
  'precipitationMm',
  'runoffToStormMm',
  'runoffToLeachateMm',
  'aetMm',
  'dSoilMm',
  'percolationMm',
  'absorbedMm',
  'dWasteMm',
  'leachateMm',
];

function PlotTable({
  view,
  onOpen,
}: {
  view: BalanceView;
  onOpen: (stepId: string, term: TermName) => void;
}) {
  return (
    <ScrollBox label="Balance by plot">
      <table className="tbl tbl-tight">
        <caption className="sr-only">
          Balance of {monthName(view.month)} by plot, m³. Any number opens its working.
        </caption>
        <thead>
          <tr>
            <th scope="col" className="sticky left-0 bg-surface">
              Plot
            </th>
            <th scope="col" className="r">
              Area, ha
            </th>
            <th scope="col" className="r">
              Days
            </th>
            {plotTerms.map((term) => (
              <th key={term} scope="col" className="r">
                {termRegister[term].name}, m³
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {view.cells.flatMap((cell) =>
            cell.plots.map((plot) => (
              <tr key={plot.stepId}>
                <th scope="row" className="sticky left-0 bg-surface">
                  {cell.code} {plot.plotName}
                  <span className="hint block">
                    {plot.coverName}
                    {plot.fromOn.endsWith('-01') ? '' : `, from ${dayNameShort(plot.fromOn)}`}
                  </span>
                </th>
                <td className="r">{formatHa(plot.areaM2)}</td>
                <td className="r">{plot.dayCount}</td>
                {plotTerms.map((term) => (
                  <td key={term} className="r">
                    <button
                      type="button"
                      className="number-button"
                      aria-label={`${formatM3((plot.terms[term] * plot.areaM2) / 1000)} m³, working of ${termRegister[term].name}, ${cell.code} ${plot.plotName}`}
                      onClick={() => onOpen(plot.stepId, term)}
                    >
                      {formatM3((plot.terms[term] * plot.areaM2) / 1000)}
                    </button>
                  </td>
                ))}
              </tr>
            )),
          )}
        </tbody>
        <tfoot>
          <tr>
            <th scope="row" className="sticky left-0 bg-surface">
              Site
            </th>
            <td className="r">{formatHa(view.site.areaM2)}</td>
            <td />
            {plotTerms.map((term) => (
              <td key={term} className="r">
                {formatM3(view.site.volumesM3[term])}
              </td>
            ))}
          </tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}

const lineWords: Record<string, string> = {
  snow: 'snowfall = melt + into snow',
  soil: 'rain + melt + returned + brought = runoff + evapotranspiration + into soil + percolation',
  cover: 'percolation = through the membrane + cover drain',
  waste: 'through the membrane + returned + free moisture = absorbed + into waste + drained',
  drain: 'drained = collected + leaked',
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
                  <PlotTable view={data} onOpen={(stepId, term) => setWorking({ stepId, term })} />
                  <p className="hint mt-2">Rows may not add to the total because of rounding.</p>
                </Section>
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
                              {line.residualMm === 0 ? '0' : line.residualMm.toExponential(1)}
                            </td>
                            <td className="r">{line.toleranceMm.toExponential(1)}</td>
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
                    {data.climate.choice && ` Missing days: ${data.climate.choice.replaceAll('-', ' ')}.`}{' '}
                    Biochemical gain or loss of water is neglected.
                  </p>
                )}
                {data.run.warnings.length > 0 && (
                  <details className="mt-4">
                    <summary className="cursor-pointer font-medium">
                      {data.run.warnings.length} warnings of the run
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
