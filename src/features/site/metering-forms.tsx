import { useFieldArray } from 'react-hook-form';
import { meterEventInput, type MeterEventInput } from '#shared/schemas/readings.ts';
import {
  meterInput,
  placeInput,
  storeInput,
  sumpInput,
  type MeterInput,
  type StoreInput,
  type SumpInput,
} from '#shared/schemas/sites.ts';
import { volumeUnits, volumeUnitsM3 } from '#shared/units/unit-factors.ts';
import { usePlace } from '../../app/place.ts';
import { CheckField, ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { cellName, optionsOf, type SectionProps } from './site-parts.tsx';

type FormProps = SectionProps & { onDone: () => void };

const unitOptions = volumeUnits.map((unit) => ({
  value: unit,
  label: `${volumeUnitsM3[unit].label}, ${volumeUnitsM3[unit].words}`,
}));

export const eventNames = {
  replace: 'meter replaced',
  rollover: 'register rolled over',
  reset: 'register reset',
  'power-loss': 'power lost, count jumped',
  'multiplier-changed': 'multiplier changed',
  bypassed: 'bypassed',
  suspect: 'suspect',
} as const;

export function SumpForm({ view, onDone }: FormProps) {
  const { site } = usePlace();
  const save = useWrite<SumpInput>(site.id, '/sumps');
  return (
    <RecordForm<SumpInput>
      schema={sumpInput}
      defaults={{
        id: newId(),
        placeId: newId(),
        code: '',
        areaServedM2: '',
        linerLowPointAboveFloorM: '',
        sensorAboveFloorM: '0',
        headLimitM: '',
        actionRateLPerHaDay: '',
      }}
      submitLabel="Add the sump"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <ChoiceField name="cellId" label="Cell" options={optionsOf(view.cells)} />
      <TextField name="code" label="Code" hint="Like S4." />
      <ChoiceField
        name="kind"
        label="Kind"
        options={[
          { value: 'primary', label: 'primary: collects leachate' },
          { value: 'leak-detection', label: 'leak detection' },
        ]}
      />
      <TextField name="areaServedM2" label="Area it drains, in square metres" unit="m²" inputMode="decimal" />
      <TextField
        name="linerLowPointAboveFloorM"
        label="Liner’s low point above the sump floor, in metres"
        unit="m"
        inputMode="decimal"
        hint="Level is not head: the sensor’s and the sump’s offsets come off first."
      />
      <TextField
        name="sensorAboveFloorM"
        label="Sensor above the sump floor, in metres"
        unit="m"
        inputMode="decimal"
      />
      <TextField name="headLimitM" label="Head limit" unit="m" inputMode="decimal" isOptional />
      <TextField
        name="actionRateLPerHaDay"
        label="Action rate of leak detection"
        unit="L/ha·d"
        inputMode="decimal"
        isOptional
      />
    </RecordForm>
  );
}

export function MeterForm({ view, onDone }: FormProps) {
  const { site } = usePlace();
  const save = useWrite<MeterInput>(site.id, '/meters');
  const places = optionsOf(view.places);
  return (
    <RecordForm<MeterInput>
      schema={meterInput}
      defaults={{
        id: newId(),
        code: '',
        name: '',
        digits: '7',
        decimals: '0',
        multiplier: '1',
        rateM3PerDayMax: '',
        installedOn: '',
      }}
      submitLabel="Add the meter"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="code" label="Code" />
      <TextField name="name" label="Name, as on the round" />
      <ChoiceField name="fromPlaceId" label="Water comes from" options={places} />
      <ChoiceField name="toPlaceId" label="Water goes to" options={places} />
      <ChoiceField
        name="sumpId"
        label="Sump it measures"
        options={view.sumps.map((sump) => ({
          value: sump.id,
          label: `${sump.code}, ${cellName(view, sump.cellId)}`,
        }))}
        isOptional
      />
      <TextField
        name="digits"
        label="Digits of the register"
        inputMode="numeric"
        hint="It wraps to zero after the last one."
      />
      <TextField name="decimals" label="Of them after the point" inputMode="numeric" />
      <ChoiceField name="unit" label="Unit printed on the register" options={unitOptions} />
      <TextField
        name="multiplier"
        label="Multiplier printed on it"
        inputMode="decimal"
        hint="1 when none is printed."
      />
      <TextField
        name="rateM3PerDayMax"
        label="Largest plausible day, in cubic metres"
        unit="m³/d"
        inputMode="decimal"
        hint="A reading that makes more is asked about, never blocked."
      />
      <TextField name="installedOn" label="Day it was installed" hint="Like 2024-05-01." />
    </RecordForm>
  );
}

export function EventForm({ view, onDone }: FormProps) {
  const { site } = usePlace();
  const save = useWrite<MeterEventInput>(site.id, '/meter-events');
  return (
    <RecordForm<MeterEventInput>
      schema={meterEventInput}
      defaults={{
        id: newId(),
        registerBefore: '',
        registerAfter: '',
        digitsAfter: '',
        unitAfter: '',
        multiplierAfter: '',
        note: '',
        observedLocal: '',
      }}
      submitLabel="Record the event"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <ChoiceField name="meterId" label="Meter" options={optionsOf(view.meters)} />
      <ChoiceField
        name="kind"
        label="What happened"
        options={Object.entries(eventNames).map(([value, label]) => ({ value, label }))}
      />
      <TextField
        name="observedLocal"
        label="Day and time on the site’s clock"
        hint="Like 2026-03-04 10:30."
      />
      <TextField name="registerBefore" label="Register before it" inputMode="decimal" isOptional />
      <TextField name="registerAfter" label="Register after it" inputMode="decimal" isOptional />
      <TextField name="digitsAfter" label="Digits of the new register" inputMode="numeric" isOptional />
      <ChoiceField name="unitAfter" label="Unit of the new register" options={unitOptions} isOptional />
      <TextField name="multiplierAfter" label="New multiplier" inputMode="decimal" isOptional />
      <TextField name="note" label="Note" isOptional isLong />
    </RecordForm>
  );
}

function StrappingFields() {
  const { fields, append, remove } = useFieldArray({ name: 'strapping' });
  return (
    <fieldset className="grid gap-3">
      <legend className="font-semibold mb-2">Level, volume and water surface</legend>
      {fields.map((field, index) => (
        <div key={field.id} className="grid grid-cols-3 gap-2 items-end">
          <TextField
            name={`strapping.${index}.levelM`}
            label={`${index + 1}: level, m`}
            inputMode="decimal"
          />
          <TextField name={`strapping.${index}.volumeM3`} label="Volume, m³" inputMode="decimal" />
          <TextField name={`strapping.${index}.surfaceM2`} label="Surface, m²" inputMode="decimal" />
          {fields.length > 2 && (
            <p className="col-span-3">
              <button type="button" className="link" onClick={() => remove(index)}>
                Take row {index + 1} out
              </button>
            </p>
          )}
        </div>
      ))}
      <p>
        <button
          type="button"
          className="btn btn-second"
          onClick={() => append({ levelM: '', volumeM3: '', surfaceM2: '' })}
        >
          Add a row
        </button>
      </p>
    </fieldset>
  );
}

export function StoreForm({ onDone }: { onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<StoreInput>(site.id, '/stores');
  const row = { levelM: '', volumeM3: '', surfaceM2: '' };
  return (
    <RecordForm<StoreInput>
      schema={storeInput}
      defaults={{
        id: newId(),
        placeId: newId(),
        code: '',
        name: '',
        isCovered: false,
        linedAreaM2: '',
        crestLevelM: '',
        operatingLevelM: '',
        strapping: [row, row],
      }}
      submitLabel="Add the store"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="code" label="Code" />
      <TextField name="name" label="Name" />
      <CheckField name="isCovered" label="It is covered: no rain falls in, nothing evaporates" />
      <TextField
        name="linedAreaM2"
        label="Lined area that drains in, in square metres"
        unit="m²"
        inputMode="decimal"
      />
      <TextField
        name="crestLevelM"
        label="Crest level, in metres"
        unit="m"
        inputMode="decimal"
        hint="A reading above it is refused."
      />
      <TextField
        name="operatingLevelM"
        label="Highest operating level, in metres"
        unit="m"
        inputMode="decimal"
      />
      <StrappingFields />
    </RecordForm>
  );
}

const placeKinds = {
  header: 'header',
  treatment: 'treatment',
  outfall: 'outfall',
  sewer: 'sewer',
  haulage: 'where loads go',
  truck: 'truck',
} as const;

export function PlaceForm({ onDone }: { onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<{ id: string; kind: string; name: string }>(site.id, '/places');
  return (
    <RecordForm<{ id: string; kind: string; name: string }>
      schema={placeInput}
      defaults={{ id: newId(), name: '' }}
      submitLabel="Add the place"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <ChoiceField
        name="kind"
        label="Kind"
        options={Object.entries(placeKinds).map(([value, label]) => ({ value, label }))}
      />
      <TextField name="name" label="Name" />
    </RecordForm>
  );
}
