import { useFieldArray } from 'react-hook-form';
import { dayName } from '#shared/calendar/day.ts';
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
import { volumeUnits, volumeUnitsM3, type VolumeUnit } from '#shared/units/unit-factors.ts';
import { usePlace } from '../../app/place.ts';
import { CheckField, ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { cellName, FormLink, optionsOf, type SectionProps } from './site-parts.tsx';

type FormProps = SectionProps & { onDone: () => void };

const unitOptions = volumeUnits.map((unit) => ({
  value: unit,
  label: `${volumeUnitsM3[unit].label}, ${volumeUnitsM3[unit].words}`,
}));
const eventNames = {
  replace: 'meter replaced',
  rollover: 'register rolled over',
  reset: 'register reset',
  'power-loss': 'power lost, count jumped',
  'multiplier-changed': 'multiplier changed',
  bypassed: 'bypassed',
  suspect: 'suspect',
} as const;

function SumpForm({ view, onDone }: FormProps) {
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

function MeterForm({ view, onDone }: FormProps) {
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

function EventForm({ view, onDone }: FormProps) {
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

function StoreForm({ onDone }: { onDone: () => void }) {
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

function PlaceForm({ onDone }: { onDone: () => void }) {
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

function MeterTable({ view }: SectionProps) {
  const place = (id: string) => view.places.find((one) => one.id === id)?.name ?? '';
  return (
    <ScrollBox label="Meters">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Meters and their events</caption>
        <thead>
          <tr>
            <th scope="col">Meter</th>
            <th scope="col">From, to</th>
            <th scope="col">Register</th>
            <th scope="col" className="r">
              Largest day, m³/d
            </th>
            <th scope="col">Events</th>
          </tr>
        </thead>
        <tbody>
          {view.meters.map((meter) => (
            <tr key={meter.id}>
              <th scope="row">
                {meter.code} {meter.name}
                <span className="hint block">since {dayName(meter.installedOn)}</span>
              </th>
              <td>
                {place(meter.fromPlaceId)} → {place(meter.toPlaceId)}
              </td>
              <td>
                {meter.digits} digits{meter.decimals ? `, ${meter.decimals} after the point` : ''},{' '}
                {volumeUnitsM3[meter.unit as VolumeUnit].label}
                {Number(meter.multiplier) === 1 ? '' : ` × ${meter.multiplier}`}
              </td>
              <td className="r">{meter.rateM3PerDayMax}</td>
              <td>
                {view.meterEvents
                  .filter((event) => event.meterId === meter.id)
                  .map((event) => (
                    <span key={event.id} className="block">
                      {dayName(event.siteDay)}: {eventNames[event.kind as keyof typeof eventNames]}
                      {event.registerBefore
                        ? `, ${Number(event.registerBefore)} → ${Number(event.registerAfter)}`
                        : ''}
                      {event.unitAfter ? ` ${volumeUnitsM3[event.unitAfter as VolumeUnit].label}` : ''}
                      {event.multiplierAfter ? ` × ${Number(event.multiplierAfter)}` : ''}
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

/** Sumps, meters with their events, stores and places: where water can be and what measures it. */
export function MeteringSection({ view }: SectionProps) {
  const { can } = usePlace();
  const mayChange = can('change:site');
  return (
    <>
      <Section
        title="Sumps"
        id="sumps"
        aside={
          mayChange &&
          view.cells.length > 0 && (
            <FormLink label="Add a sump">{(onDone) => <SumpForm view={view} onDone={onDone} />}</FormLink>
          )
        }
      >
        {view.sumps.length === 0 ? (
          <Empty>No sump yet. Each cell drains to one, sometimes to a second for leak detection.</Empty>
        ) : (
          <ScrollBox label="Sumps">
            <table className="tbl tbl-tight">
              <caption className="sr-only">Sumps</caption>
              <thead>
                <tr>
                  <th scope="col">Sump</th>
                  <th scope="col">Cell</th>
                  <th scope="col">Kind</th>
                  <th scope="col" className="r">
                    Drains, m²
                  </th>
                  <th scope="col" className="r">
                    Liner above floor, m
                  </th>
                  <th scope="col" className="r">
                    Head limit, m
                  </th>
                  <th scope="col" className="r">
                    Action rate, L/ha·d
                  </th>
                </tr>
              </thead>
              <tbody>
                {view.sumps.map((sump) => (
                  <tr key={sump.id}>
                    <th scope="row">{sump.code}</th>
                    <td>{cellName(view, sump.cellId)}</td>
                    <td>{sump.kind === 'primary' ? 'primary' : 'leak detection'}</td>
                    <td className="r">{formatNumber(Number(sump.areaServedM2))}</td>
                    <td className="r">{sump.linerLowPointAboveFloorM}</td>
                    <td className="r">{sump.headLimitM ?? 'none set'}</td>
                    <td className="r">{sump.actionRateLPerHaDay ?? '–'}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </ScrollBox>
        )}
        <p className="hint mt-2">
          A sump, manhole or wet well can hold gas or no oxygen. The record never permits entry: test the air.
        </p>
      </Section>
      <Section
        title="Meters"
        id="meters"
        aside={
          <span className="flex gap-4">
            {mayChange && (
              <FormLink label="Add a meter">{(onDone) => <MeterForm view={view} onDone={onDone} />}</FormLink>
            )}
            {can('settle:reading') && view.meters.length > 0 && (
              <FormLink label="Record a meter event">
                {(onDone) => <EventForm view={view} onDone={onDone} />}
              </FormLink>
            )}
          </span>
        }
      >
        {view.meters.length === 0 ? (
          <Empty>No meter yet. A meter measures the water from one place to another.</Empty>
        ) : (
          <MeterTable view={view} />
        )}
      </Section>
      <Section
        title="Stores and places"
        id="stores"
        aside={
          mayChange && (
            <span className="flex gap-4">
              <FormLink label="Add a store">{(onDone) => <StoreForm onDone={onDone} />}</FormLink>
              <FormLink label="Add a place">{(onDone) => <PlaceForm onDone={onDone} />}</FormLink>
            </span>
          )
        }
      >
        {view.stores.map((store) => {
          const table = view.storeLevels.filter((row) => row.storeId === store.id);
          return (
            <details key={store.id} className="sheet pad mb-3">
              <summary className="cursor-pointer font-medium min-h-6">
                {store.code}: {store.isCovered ? 'covered' : 'open'}, crest {store.crestLevelM} m, operating
                level {store.operatingLevelM} m, {table.length} rows of level and volume
              </summary>
              <table className="tbl tbl-tight mt-2">
                <caption className="sr-only">Level and volume of {store.code}</caption>
                <thead>
                  <tr>
                    <th scope="col" className="r">
                      Level, m
                    </th>
                    <th scope="col" className="r">
                      Volume, m³
                    </th>
                    <th scope="col" className="r">
                      Surface, m²
                    </th>
                  </tr>
                </thead>
                <tbody>
                  {table.map((row) => (
                    <tr key={row.levelM}>
                      <td className="r">{row.levelM}</td>
                      <td className="r">{formatNumber(Number(row.volumeM3), 1)}</td>
                      <td className="r">{formatNumber(Number(row.surfaceM2), 1)}</td>
                    </tr>
                  ))}
                </tbody>
              </table>
            </details>
          );
        })}
        <p>Places: {view.places.map((place) => place.name).join(', ')}.</p>
      </Section>
      <Section title="Walking order" id="order">
        <ol className="sheet lines px-4 list-none">
          {view.roundPoints.map((point) => (
            <li key={point.id} className="!py-2">
              {point.position}. {pointName(view, point)}
              {point.everyDays > 1 && <span className="hint"> every {point.everyDays} days</span>}
            </li>
          ))}
        </ol>
      </Section>
    </>
  );
}

function pointName(view: SectionProps['view'], point: SectionProps['view']['roundPoints'][number]): string {
  const found = [...view.meters, ...view.stations].find((one) => one.id === point.subjectId);
  if (found) return found.name;
  const store =
    view.stores.find((one) => one.id === point.subjectId) ??
    view.sumps.find((one) => one.id === point.subjectId);
  return `${store?.code ?? point.kind}, level`;
}
