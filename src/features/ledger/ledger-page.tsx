import { useState } from 'react';
import { Link, useParams, useSearchParams } from 'react-router';
import { dayNameShort } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import type { LedgerView } from '#shared/views/month-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { PageHead, ScrollBox, Section } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { Basis } from '../../components/words.tsx';
import { formatM3, formatNumber, formatSigned } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { EntrySource } from './entry-source.tsx';
import { EstimateForm } from './estimate-form.tsx';
import { FlowPicture } from './flow-picture.tsx';
import { StoresTable } from './stores-table.tsx';

const pageSize = 25;

function stateSentence(view: LedgerView): string {
  const stores = view.stores.map((store) =>
    store.balance
      ? `${store.name} ${store.balance.isInside ? 'closes' : 'does not close'}: ${formatSigned(store.balance.unaccountedM3)} m³ unaccounted, tolerance ±${formatM3(store.balance.toleranceM3)}.`
      : `${store.name}: ${store.missing}`,
  );
  const estimated = view.entries.filter((entry) => entry.basis === 'estimated').length;
  return [
    ...stores,
    estimated ? `${estimated} entries are estimated.` : '',
    view.entries.length ? '' : 'No water was posted this month.',
  ]
    .filter(Boolean)
    .join(' ');
}

function FlowsTable({ view }: { view: LedgerView }) {
  if (!view.flows.length)
    return (
      <Empty>
        No volume was posted this month. Entries follow from two readings of one meter, or a load out.
      </Empty>
    );
  return (
    <ScrollBox label="Volumes from place to place">
      <table className="tbl">
        <caption className="sr-only">Volumes from place to place in {monthName(view.month)}, m³</caption>
        <thead>
          <tr>
            <th scope="col">From, to</th>
            <th scope="col" className="r">
              Volume, m³
            </th>
            <th scope="col">Of it</th>
          </tr>
        </thead>
        <tbody>
          {view.flows.map((flow) => (
            <tr key={flow.fromPlaceId + flow.toPlaceId}>
              <th scope="row">
                {flow.from} → {flow.to}
              </th>
              <td className="r">{formatM3(flow.volumeM3)}</td>
              <td className="text-sm">
                {Object.entries(flow.bases).map(([basis, volume]) => (
                  <span key={basis} className="mr-3">
                    <Basis basis={basis} /> {formatM3(volume)}
                  </span>
                ))}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function Entries({ view, onOpen }: { view: LedgerView; onOpen: (id: string) => void }) {
  const [search, setSearch] = useSearchParams();
  const [count, setCount] = useState(pageSize);
  const basis = search.get('basis');
  const rows = view.entries.filter((entry) => !basis || entry.basis === basis);
  const bases = [...new Set(view.entries.map((entry) => entry.basis))];
  return (
    <>
      <div className="flex flex-wrap gap-2 mb-3 no-print" role="group" aria-label="Basis of the entries">
        <button type="button" className="choice !w-auto" aria-pressed={!basis} onClick={() => setSearch({})}>
          All {view.entries.length}
        </button>
        {bases.map((one) => (
          <button
            key={one}
            type="button"
            className="choice !w-auto"
            aria-pressed={basis === one}
            onClick={() => setSearch({ basis: one })}
          >
            {one} {view.entries.filter((entry) => entry.basis === one).length}
          </button>
        ))}
      </div>
      <ScrollBox label="Entries, latest first">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Entries of {monthName(view.month)}, latest first, m³</caption>
          <thead>
            <tr>
              <th scope="col">Day</th>
              <th scope="col">From, to</th>
              <th scope="col" className="r">
                Volume, m³
              </th>
              <th scope="col">Basis</th>
              <th scope="col">Source</th>
              <th scope="col">By</th>
            </tr>
          </thead>
          <tbody>
            {rows.slice(0, count).map((entry) => (
              <tr key={entry.id}>
                <th scope="row" className="whitespace-nowrap">
                  {dayNameShort(entry.siteDay)}
                </th>
                <td className="min-w-[11em]!">
                  {entry.from} → {entry.to}
                </td>
                <td className="r">
                  <button
                    type="button"
                    className="number-button"
                    aria-label={`${formatNumber(Number(entry.volumeM3), 2)} m³, ${entry.from}, ${dayNameShort(entry.siteDay)}: where it comes from`}
                    onClick={() => onOpen(entry.id)}
                  >
                    {formatNumber(Number(entry.volumeM3), 2)}
                  </button>
                </td>
                <td>
                  <Basis basis={entry.basis} />
                </td>
                <td>
                  {entry.reversesId
                    ? 'reverses an earlier entry'
                    : entry.meterCode
                      ? `meter ${entry.meterCode}`
                      : 'ticket'}
                  {entry.reason && <span className="hint block">{entry.reason}</span>}
                </td>
                <td>{entry.by}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
      {rows.length > count && (
        <p className="mt-3 no-print">
          <button type="button" className="btn btn-second" onClick={() => setCount(count + pageSize)}>
            Show {Math.min(pageSize, rows.length - count)} more of {rows.length}
          </button>
        </p>
      )}
    </>
  );
}

function Loads({ view }: { view: LedgerView }) {
  const { loads } = view;
  if (!loads.count) return <Empty>No load left the site by truck this month.</Empty>;
  return (
    <ScrollBox label="Loads out">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Loads out in {monthName(view.month)}, m³</caption>
        <thead>
          <tr>
            <th scope="col">Day</th>
            <th scope="col">Ticket</th>
            <th scope="col">Hauler</th>
            <th scope="col" className="r">
              Nominal, m³
            </th>
            <th scope="col" className="r">
              Received, m³
            </th>
            <th scope="col">Counted</th>
          </tr>
        </thead>
        <tbody>
          {loads.rows.map((load) => (
            <tr key={load.id}>
              <th scope="row" className="whitespace-nowrap">
                {dayNameShort(load.siteDay)}
              </th>
              <td>{load.ticket}</td>
              <td>{load.hauler}</td>
              <td className="r">
                {load.nominalVolumeM3 === null ? '–' : formatNumber(Number(load.nominalVolumeM3), 1)}
              </td>
              <td className="r">
                {load.receivedVolumeM3 === null ? 'not yet' : formatNumber(Number(load.receivedVolumeM3), 1)}
              </td>
              <td>{load.officialVolume}</td>
            </tr>
          ))}
        </tbody>
        <tfoot>
          <tr>
            <th scope="row">{loads.count} loads</th>
            <td />
            <td />
            <td className="r">{formatNumber(loads.nominalM3, 1)}</td>
            <td className="r">{formatNumber(loads.receivedM3, 1)}</td>
            <td>{loads.receivedCount} received</td>
          </tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}

/** Every cubic metre of the month from one place to another. */
export function LedgerPage() {
  const { month = '' } = useParams();
  const { site, can } = usePlace();
  const query = useRecord<LedgerView>(site.id, `/ledger/${month}`);
  const [openEntry, setOpenEntry] = useState<string | null>(null);
  const [isEstimating, setIsEstimating] = useState(false);
  return (
    <>
      <PageHead
        title={`Ledger, ${monthName(month)}`}
        sentence={query.data && stateSentence(query.data)}
        crumb={
          query.data?.act === 'close'
            ? 'This month is closed. What arrives late is kept beside it.'
            : undefined
        }
      />
      <Viewed query={query}>
        {(view) => (
          <>
            {view.pending.length > 0 && (
              <div className="box box-warn mb-5">
                <p className="font-semibold">Arrived after the month was closed, not counted yet</p>
                <ul className="list-disc pl-5">
                  {view.pending.map((one) => (
                    <li key={one.id}>{one.sentence}</li>
                  ))}
                </ul>
                <p>
                  <Link to={`/sites/${site.slug}/month/${month}`}>Reopening the month counts it</Link>
                </p>
              </div>
            )}
            {view.stores.map((store) => (
              <FlowPicture key={store.id} view={view} store={store} />
            ))}
            <div className="grid gap-8 mt-8 lg:grid-cols-2 items-start [&>section]:mt-0">
              <Section title="Stores, opening to closing" aside="m³">
                <StoresTable view={view} />
              </Section>
              <Section title="From place to place" aside="m³">
                <FlowsTable view={view} />
              </Section>
            </div>
            <Section
              title="Entries"
              aside={
                <>
                  latest first; any volume opens its source
                  {can('settle:reading') && (
                    <>
                      {' '}
                      ·{' '}
                      <button type="button" className="link" onClick={() => setIsEstimating(true)}>
                        Estimate a span
                      </button>
                    </>
                  )}
                </>
              }
            >
              <Entries view={view} onOpen={setOpenEntry} />
            </Section>
            <Section title="Loads out">
              <Loads view={view} />
            </Section>
            <EntrySource entryId={openEntry} onClose={() => setOpenEntry(null)} />
            <Panel title="Estimate a span" isOpen={isEstimating} onClose={() => setIsEstimating(false)}>
              <EstimateForm onDone={() => setIsEstimating(false)} />
            </Panel>
          </>
        )}
      </Viewed>
    </>
  );
}
