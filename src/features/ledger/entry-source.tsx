import { useState } from 'react';
import { dayName } from '#shared/calendar/day.ts';
import type { EntrySourceView } from '#shared/views/month-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { Viewed } from '../../components/state.tsx';
import { Basis } from '../../components/words.tsx';
import { formatInstant, formatLocal, formatNumber } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { isVoidable, VoidFact } from './void-fact.tsx';

const heldWords = {
  'register-went-down': 'held: the register went down, and nobody has said why',
  dispute: 'held: two readings of one time differ',
};

type Interval = EntrySourceView['intervals'][number];

function IntervalRow({ one }: { one: Interval }) {
  return (
    <tr>
      <td>
        {formatLocal(one.from)} to {formatLocal(one.to)}
        <span className="hint block">
          {formatNumber(one.hours, 1)} h, {one.basis}
        </span>
      </td>
      <td>
        ({one.closing} − {one.opening}
        {Number(one.wrap) ? ` + ${one.wrap}` : ''}) × {Number(one.multiplier)} {one.unit}
        {one.heldBecause && (
          <span className="block text-warn">{heldWords[one.heldBecause as 'dispute']}</span>
        )}
      </td>
      <td className="r">{one.volumeM3 === null ? 'held' : formatNumber(Number(one.volumeM3), 2)}</td>
    </tr>
  );
}

function Source({ entryId, onDone }: { entryId: string; onDone: () => void }) {
  const { site, can } = usePlace();
  const [voidingId, setVoidingId] = useState<string | null>(null);
  const query = useRecord<EntrySourceView>(site.id, `/entries/${entryId}`);
  return (
    <Viewed query={query}>
      {(view) => (
        <div className="grid gap-5">
          <p>
            <strong>{formatNumber(Number(view.volumeM3), 3)} m³</strong> on {dayName(view.siteDay)},{' '}
            <Basis basis={view.basis} />
            {view.meter && `, meter ${view.meter.code} ${view.meter.name}`}.{view.reason && ` ${view.reason}`}
          </p>
          {view.intervals.length > 0 && (
            <table className="tbl tbl-tight">
              <caption>Intervals of the day</caption>
              <thead>
                <tr>
                  <th scope="col">From, to</th>
                  <th scope="col">How</th>
                  <th scope="col" className="r">
                    m³
                  </th>
                </tr>
              </thead>
              <tbody>
                {view.intervals.map((one) => (
                  <IntervalRow key={one.from} one={one} />
                ))}
              </tbody>
            </table>
          )}
          <table className="tbl tbl-tight">
            <caption>What was recorded</caption>
            <thead>
              <tr>
                <th scope="col">When</th>
                <th scope="col">What was seen</th>
                <th scope="col">By</th>
              </tr>
            </thead>
            <tbody>
              {view.facts.map((fact) => (
                <tr key={fact.id}>
                  <td className="whitespace-nowrap">
                    {formatLocal(fact.when)}
                    <span className="hint block">{fact.kind}</span>
                  </td>
                  <td>
                    {fact.words}
                    {fact.note && <span className="hint block">{fact.note}</span>}
                    {can('settle:reading') && isVoidable(fact.kind) && fact.id !== voidingId && (
                      <button type="button" className="link block" onClick={() => setVoidingId(fact.id)}>
                        Void it
                      </button>
                    )}
                    {isVoidable(fact.kind) && fact.id === voidingId && (
                      <VoidFact kind={fact.kind} id={fact.id} onDone={onDone} />
                    )}
                  </td>
                  <td>{fact.by}</td>
                </tr>
              ))}
            </tbody>
          </table>
          <p className="hint">
            Posted {formatInstant(view.recordedAt)} by {view.by}.
          </p>
        </div>
      )}
    </Viewed>
  );
}

/** Where one entry comes from: intervals, readings, tickets. */
export function EntrySource({ entryId, onClose }: { entryId: string | null; onClose: () => void }) {
  return (
    <Panel title="Where this number comes from" isOpen={entryId !== null} onClose={onClose}>
      {entryId && <Source key={entryId} entryId={entryId} onDone={onClose} />}
    </Panel>
  );
}
