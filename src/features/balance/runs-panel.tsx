import { useState } from 'react';
import { Link } from 'react-router';
import { freezeInput } from '#shared/schemas/balance.ts';
import { petMethodNames, runoffMethodNames, soilLawNames } from '#shared/water-balance/method-names.ts';
import type { BalanceView, ParameterSetsView } from '#shared/views/balance-view.ts';
import { usePlace } from '../../app/place.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { Template, Word } from '../../components/words.tsx';
import { formatInstant } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';
import { CalibrationPanel } from './calibration-panel.tsx';
import { ParameterForm } from './parameter-form.tsx';

function Parameters({ view }: { view: BalanceView }) {
  const { site, can } = usePlace();
  const query = useRecord<ParameterSetsView>(site.id, '/parameter-sets');
  const [isEditing, setIsEditing] = useState(false);
  const [isFitting, setIsFitting] = useState(false);
  return (
    <Viewed query={query}>
      {({ current }) => {
        const p = current.values;
        const rows: [string, string, string][] = [
          ['Potential ET', petMethodNames[p.petMethod], ''],
          ['Runoff', runoffMethodNames[p.runoffMethod], ''],
          ['Soil law', soilLawNames[p.soilLaw], ''],
          ['Runoff factor', String(p.runoffFactor), ''],
          ['PET factor', String(p.petFactor), ''],
          [
            'Snow',
            p.snow.isOn
              ? `on: snow at or below ${p.snow.tSnowC} °C, rain from ${p.snow.tRainC} °C, melt at most ${p.snow.meltMaxFraction} a month`
              : 'off',
            '',
          ],
          ['Frozen ground', p.isFrostOn ? `percolation stops at or below ${p.tFrostC} °C` : 'off', ''],
          ['Recession constant of the waste', String(p.recessionPerMonth), '1/month'],
          ['Channelled share', String(p.channelledFraction), ''],
          ['Factor on the deficit of placed waste', String(p.deficitFactor), ''],
          p.leakMethod === 'fraction'
            ? ['Leak share', String(p.leakFraction), '']
            : ['Leakage', `${p.liner.defectsPerHa} defects a hectare of ${p.liner.defectAreaM2} m²`, ''],
          ['First store', p.isSpunUp ? 'spun up on the first year' : 'entered, or half', ''],
          ['Percent muted under', String(p.percentFloorMm), 'mm'],
        ];
        if (isEditing) return <ParameterForm current={current} onDone={() => setIsEditing(false)} />;
        return (
          <div className="sheet pad">
            <p className="font-semibold">
              {current.name}, version {current.version} {!current.confirmedAt && <Template />}
            </p>
            <dl className="grid grid-cols-[minmax(0,1fr)_minmax(0,1.4fr)] gap-x-4 gap-y-1 mt-2 text-sm">
              {rows.map(([name, value, unit]) => (
                <div key={name} className="contents">
                  <dt className="text-muted">{name}</dt>
                  <dd>
                    {value} {unit}
                  </dd>
                </div>
              ))}
            </dl>
            {can('change:parameters') && (
              <p className="mt-3 flex flex-wrap gap-2">
                <button type="button" className="btn btn-second" onClick={() => setIsEditing(true)}>
                  Make a new set
                </button>
                <button type="button" className="btn btn-second" onClick={() => setIsFitting(true)}>
                  Fit to what was pumped
                </button>
              </p>
            )}
            <CalibrationPanel
              cells={view.cells}
              current={current}
              isOpen={isFitting}
              onClose={() => setIsFitting(false)}
            />
          </div>
        );
      }}
    </Viewed>
  );
}

function AcceptButton({ runId }: { runId: string }) {
  const { site } = usePlace();
  const accept = useWrite<Record<string, never>>(site.id, `/balance-runs/${runId}/acceptance`);
  return (
    <button type="button" className="link" onClick={() => accept.mutate({})}>
      Accept for Compare and Report
    </button>
  );
}

/** Parameters, the working run, and the frozen runs that keep theirs for ever. */
export function RunsPanel({ view }: { view: BalanceView }) {
  const { site, can } = usePlace();
  const freeze = useWrite<{ id: string; note?: string }>(site.id, '/balance-runs');
  return (
    <div className="grid gap-8 lg:grid-cols-2 mt-10 no-print [&>section]:mt-0">
      <Section title="Parameters">
        <Parameters view={view} />
      </Section>
      <Section title="Runs">
        <div className="sheet pad grid gap-3">
          <p>
            <Link to={`/sites/${site.slug}/balance/${view.month}`}>Working run</Link>: follows its inputs,
            computed again after every change.
          </p>
          <ul className="lines list-none">
            {view.frozenRuns.map((run) => (
              <li key={run.id} className="flex flex-wrap gap-x-4 items-baseline">
                <Link to={`?run=${run.id}`}>Frozen run {run.number}</Link>
                <span className="hint">
                  {formatInstant(run.computedAt)}
                  {run.note ? `, ${run.note}` : ''}
                </span>
                <span className="ml-auto">
                  {run.acceptedAt ? (
                    <Word look="good">accepted</Word>
                  ) : can('freeze:run') ? (
                    <AcceptButton runId={run.id} />
                  ) : (
                    <span className="hint">not accepted</span>
                  )}
                </span>
              </li>
            ))}
          </ul>
          {view.frozenRuns.length === 0 && (
            <p className="text-muted">
              No run was frozen yet. Compare uses the working run until one is accepted.
            </p>
          )}
          {can('freeze:run') && !view.run.problem && (
            <RecordForm<{ id: string; note: string }>
              key={view.frozenRuns.length}
              schema={freezeInput}
              defaults={{ id: newId(), note: '' }}
              submitLabel="Freeze the working run"
              onSubmit={(values) => freeze.mutateAsync(values)}
            >
              <TextField name="note" label="What it is for" isOptional />
            </RecordForm>
          )}
        </div>
      </Section>
    </div>
  );
}
