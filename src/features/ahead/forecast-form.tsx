import { useFieldArray, useFormContext } from 'react-hook-form';
import { forecastInput, type ForecastInput } from '#shared/schemas/forecast.ts';
import type { ForecastStartView } from '#shared/views/forecast-view.ts';
import { usePlace } from '../../app/place.ts';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';

const around = (value: number, below: number, above: number) => ({
  low: String(Number((value * below).toPrecision(3))),
  high: String(Number((value * above).toPrecision(3))),
});

const planNames = ['Cover as it is now', 'Plan B', 'Plan C'];

const defaultsOf = (start: ForecastStartView): ForecastInput => {
  const { parameters: p } = start;
  return {
    id: newId(),
    monthCount: '12',
    memberCount: '600',
    seed: '4182',
    storeId: start.stores[0]?.id ?? '',
    plantM3PerDay: start.treatedM3PerDay === null ? '' : String(Math.round(start.treatedM3PerDay)),
    loadM3: '20.8',
    loadsPerDayMax: '6',
    stormMm: '127',
    stormAreaM2: String(Math.round(start.openAreaM2)),
    stormShare: '0.9',
    ranges: {
      runoffFactor: around(p.runoffFactor, 0.8, 1.2),
      petFactor: around(p.petFactor, 0.85, 1.15),
      recessionPerMonth: around(p.recessionPerMonth, 0.6, 1.6),
      channelledFraction: { low: '0', high: String(Math.max(0.2, 2 * p.channelledFraction)) },
    },
    scenarios: [{ name: planNames[0]!, changes: [] }],
  };
};

function ChangeFields({ start, name }: { start: ForecastStartView; name: string }) {
  const { watch, setValue } = useFormContext();
  const kind = watch(`${name}.kind`) as 'cover' | 'cell';
  return (
    <>
      {kind === 'cover' ? (
        <ChoiceField
          name={`${name}.plotId`}
          label="Plot"
          options={start.plots.map((plot) => ({
            value: plot.id,
            label: `${plot.cellCode} ${plot.name}, ${formatNumber(Number(plot.areaM2), 0)} m², ${plot.coverName}`,
          }))}
        />
      ) : (
        <TextField name={`${name}.code`} label="Code of the new cell" />
      )}
      <TextField name={`${name}.onDay`} label="Day" hint="Like 2027-04-01." />
      <ChoiceField
        name={`${name}.coverTypeId`}
        label={kind === 'cover' ? 'New cover' : 'Ground it opens with'}
        options={start.coverTypes.map((type) => ({ value: type.id, label: type.name }))}
      />
      <TextField name={`${name}.areaM2`} label="Area, in square metres" unit="m²" inputMode="decimal" />
      {kind === 'cover' && (
        <p>
          <button
            type="button"
            className="link"
            onClick={() =>
              setValue(
                `${name}.areaM2`,
                start.plots.find((plot) => plot.id === watch(`${name}.plotId`))?.areaM2 ?? '',
              )
            }
          >
            Take the whole plot
          </button>
        </p>
      )}
    </>
  );
}

function PlanFields({
  start,
  index,
  onRemove,
}: {
  start: ForecastStartView;
  index: number;
  onRemove: () => void;
}) {
  const name = `scenarios.${index}`;
  const { fields, append, remove } = useFieldArray({ name: `${name}.changes` });
  const empty = { onDay: '', coverTypeId: '', areaM2: '' };
  return (
    <fieldset className="box grid gap-4">
      <legend className="font-semibold px-1">Plan {'ABC'[index]}</legend>
      <TextField name={`${name}.name`} label="Name of the plan" />
      {index === 0 && fields.length === 0 && (
        <p className="hint">Nothing changes: the plan to compare with.</p>
      )}
      {fields.map((field, change) => (
        <div key={field.id} className="grid gap-3 border-t border-line pt-3">
          <ChangeFields start={start} name={`${name}.changes.${change}`} />
          <p>
            <button type="button" className="link" onClick={() => remove(change)}>
              Take this change out
            </button>
          </p>
        </div>
      ))}
      <p className="flex flex-wrap gap-2">
        <button
          type="button"
          className="btn btn-second"
          onClick={() => append({ kind: 'cover', plotId: '', ...empty })}
        >
          Cover some ground
        </button>
        <button
          type="button"
          className="btn btn-second"
          onClick={() => append({ kind: 'cell', code: '', ...empty })}
        >
          Open a cell
        </button>
        {index > 0 && (
          <button type="button" className="link min-h-12" onClick={onRemove}>
            Take plan {'ABC'[index]} out
          </button>
        )}
      </p>
    </fieldset>
  );
}

function Plans({ start }: { start: ForecastStartView }) {
  const { fields, append, remove } = useFieldArray({ name: 'scenarios' });
  return (
    <>
      {fields.map((field, index) => (
        <PlanFields key={field.id} start={start} index={index} onRemove={() => remove(index)} />
      ))}
      {fields.length < planNames.length && (
        <p>
          <button
            type="button"
            className="btn btn-second"
            onClick={() => append({ name: planNames[fields.length], changes: [] })}
          >
            Add a plan beside it
          </button>
        </p>
      )}
    </>
  );
}

function RangeFields({ name, label }: { name: string; label: string }) {
  return (
    <div className="grid grid-cols-2 gap-3">
      <TextField name={`ranges.${name}.low`} label={`${label}, low`} inputMode="decimal" />
      <TextField name={`ranges.${name}.high`} label="high" inputMode="decimal" />
    </div>
  );
}

/** What is asked ahead: how far, which plans, what empties the store, how wide the parameters may lie. */
export function ForecastForm({
  start,
  onStarted,
}: {
  start: ForecastStartView;
  onStarted: (id: string) => void;
}) {
  const { site } = usePlace();
  const run = useWrite<ForecastInput, { id: string }>(site.id, '/forecasts', {
    onDone: ({ id }) => onStarted(id),
  });
  return (
    <RecordForm<ForecastInput>
      schema={forecastInput}
      defaults={defaultsOf(start)}
      submitLabel="Look ahead"
      onSubmit={(values) => run.mutateAsync({ ...values, id: newId() })}
    >
      <TextField name="monthCount" label="Months ahead, 3 to 60" inputMode="numeric" />
      <Plans start={start} />
      <ChoiceField
        name="storeId"
        label="Store that takes the leachate"
        isOptional
        options={start.stores.map((store) => ({ value: store.id, label: `${store.code} ${store.name}` }))}
      />
      <TextField
        name="plantM3PerDay"
        label="What the plant can treat"
        unit="m³/d"
        inputMode="decimal"
        hint={
          start.treatedM3PerDay === null
            ? 'Nothing left the store in the last twelve months.'
            : `In the last twelve months ${formatNumber(start.treatedM3PerDay, 0)} m³ a day left the store.`
        }
      />
      <TextField name="loadM3" label="Volume of a load" unit="m³" inputMode="decimal" />
      <TextField name="loadsPerDayMax" label="Loads a day at most" inputMode="decimal" />
      <TextField
        name="stormMm"
        label="Design storm"
        unit="mm"
        inputMode="decimal"
        hint="The permit’s own: often 24 hours in 25 years."
      />
      <TextField
        name="stormAreaM2"
        label="Open ground that drains to the store, in square metres"
        unit="m²"
        inputMode="decimal"
        hint="Working area and lined floor of today; the store’s own catchment is counted beside it."
      />
      <TextField
        name="stormShare"
        label="Share of it that arrives from open ground"
        inputMode="decimal"
        hint="0.9 is common practice, no source."
      />
      <details className="box">
        <summary className="font-semibold cursor-pointer">Draws and ranges</summary>
        <div className="grid gap-4 mt-3">
          <TextField name="memberCount" label="Draws, 50 to 2000" inputMode="numeric" />
          <TextField
            name="seed"
            label="Seed"
            inputMode="numeric"
            hint="The same seed gives the same numbers."
          />
          <p className="hint">
            Each draw takes its parameters evenly from these ranges: our choice, no source.
          </p>
          <RangeFields name="runoffFactor" label="Runoff factor" />
          <RangeFields name="petFactor" label="Evapotranspiration factor" />
          <RangeFields name="recessionPerMonth" label="Recession, 1/month" />
          <RangeFields name="channelledFraction" label="Channelled share" />
        </div>
      </details>
    </RecordForm>
  );
}
