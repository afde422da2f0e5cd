import { useFieldArray } from 'react-hook-form';
import { dayName } from '#shared/calendar/day.ts';
import {
  cellInput,
  cellNameInput,
  coverChangeInput,
  coverCorrectionInput,
  wasteInput,
  type CellInput,
  type CellNameInput,
  type CoverChangeInput,
  type CoverCorrectionInput,
  type WasteInput,
} from '#shared/schemas/sites.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { m2, optionsOf, type SectionProps } from './site-parts.tsx';

function PlotFields({ view }: SectionProps) {
  const { fields, append, remove } = useFieldArray({ name: 'plots' });
  return (
    <fieldset className="grid gap-4">
      <legend className="font-semibold mb-2">
        Plots: ground under one cover each; together they make the lined area
      </legend>
      {fields.map((field, index) => (
        <div key={field.id} className="box grid gap-3">
          <TextField name={`plots.${index}.name`} label={`Plot ${index + 1}, name`} />
          <TextField
            name={`plots.${index}.areaM2`}
            label={`Plot ${index + 1}, area in square metres`}
            unit="m²"
            inputMode="decimal"
          />
          <ChoiceField
            name={`plots.${index}.coverTypeId`}
            label={`Plot ${index + 1}, cover on the opening day`}
            options={optionsOf(view.coverTypes)}
          />
          {fields.length > 1 && (
            <p>
              <button type="button" className="link" onClick={() => remove(index)}>
                Take plot {index + 1} out
              </button>
            </p>
          )}
        </div>
      ))}
      <p>
        <button
          type="button"
          className="btn btn-second"
          onClick={() => append({ id: newId(), name: '', areaM2: '', coverTypeId: '' })}
        >
          Add a plot
        </button>
      </p>
    </fieldset>
  );
}

export function CellForm({ view, onDone }: SectionProps & { onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<CellInput>(site.id, '/cells');
  return (
    <RecordForm<CellInput>
      schema={cellInput}
      defaults={{
        id: newId(),
        code: '',
        name: '',
        linedAreaM2: '',
        openedOn: '',
        evidence: '',
        areaReason: '',
        plots: [{ id: newId(), name: '', areaM2: '', coverTypeId: '' }],
      }}
      submitLabel="Add the cell"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="code" label="Code" hint="Short, like C4." />
      <TextField name="name" label="Name" />
      <TextField
        name="linedAreaM2"
        label="Lined area, in square metres"
        unit="m²"
        inputMode="decimal"
        hint="1 ha is 10 000 m²; 1 acre is 4 046.86 m²."
      />
      <TextField name="openedOn" label="Day the cell opened" hint="Like 2024-05-01." />
      <TextField name="evidence" label="Where the area comes from" hint="A survey or an as-built drawing." />
      <PlotFields view={view} />
      <TextField name="areaReason" label="Why the plots do not add up exactly" isOptional isLong />
    </RecordForm>
  );
}

export function CoverForm({ view, plotId, onDone }: SectionProps & { plotId: string; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<CoverChangeInput>(site.id, '/cover-periods');
  const plot = view.plots.find((one) => one.id === plotId)!;
  return (
    <RecordForm<CoverChangeInput>
      schema={coverChangeInput}
      defaults={{
        plotId,
        onDay: '',
        areaM2: plot.areaM2,
        newPlotId: newId(),
        restPlotId: newId(),
        newPlotName: `${plot.name}, covered`,
        evidence: '',
        initialSoilStoreMm: '',
      }}
      submitLabel="Record the cover"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <p>
        Plot {plot.name} has {m2(plot.areaM2)} m². When only a part is covered, the plot ends that day and two
        plots go on whose areas add exactly to it.
      </p>
      <TextField name="onDay" label="Day the ground was covered" hint="Like 2026-03-12, also in mid-month." />
      <ChoiceField name="coverTypeId" label="New cover" options={optionsOf(view.coverTypes)} />
      <TextField
        name="areaM2"
        label="Area that was covered, in square metres"
        unit="m²"
        inputMode="decimal"
      />
      <TextField name="newPlotName" label="Name of the covered part" />
      <TextField
        name="initialSoilStoreMm"
        label="Water in the placed soil"
        unit="mm"
        inputMode="decimal"
        hint="Empty: half of the available water of the new cover, our template. The difference from what the old soil held is its own term of the balance: enter what is really there."
        isOptional
      />
      <TextField name="evidence" label="Evidence" hint="A survey, a photo or a certificate." />
    </RecordForm>
  );
}

export function WasteForm({ cellId, onDone }: { cellId: string; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<WasteInput>(site.id, '/waste-placed');
  return (
    <RecordForm<WasteInput>
      schema={wasteInput}
      defaults={{
        id: newId(),
        cellId,
        month: '',
        massT: '',
        bulkDensityTPerM3: '0.8',
        moistureFraction: '0.25',
        fieldCapacityFraction: '0.3',
        source: '',
      }}
      submitLabel="Record the waste"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <p>
        Density, moisture and field capacity stand at templates (Fenn, Hanley and DeGeare 1975, from memory);
        enter the site’s own.
      </p>
      <TextField name="month" label="Month" hint="Like 2026-03." />
      <TextField name="massT" label="Waste placed, in tonnes" unit="t" inputMode="decimal" />
      <TextField name="bulkDensityTPerM3" label="Bulk density in place" unit="t/m³" inputMode="decimal" />
      <TextField name="moistureFraction" label="Moisture by wet weight, share of one" inputMode="decimal" />
      <TextField
        name="fieldCapacityFraction"
        label="Field capacity by volume, share of one"
        inputMode="decimal"
      />
      <TextField name="source" label="Where the tonnes come from" hint="The weighbridge, for instance." />
    </RecordForm>
  );
}

export function CellNameForm({
  cell,
  onDone,
}: {
  cell: SiteStructureView['cells'][number];
  onDone: () => void;
}) {
  const { site } = usePlace();
  const save = useWrite<CellNameInput>(site.id, '/cell-names');
  return (
    <RecordForm<CellNameInput>
      schema={cellNameInput}
      defaults={{ cellId: cell.id, code: cell.code, name: cell.name }}
      submitLabel="Rename the cell"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="code" label="Code" />
      <TextField name="name" label="Name" />
    </RecordForm>
  );
}

export function CoverCorrectionForm({
  view,
  period,
  onDone,
}: SectionProps & { period: SiteStructureView['coverPeriods'][number]; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<CoverCorrectionInput>(site.id, '/cover-corrections');
  const name = view.coverTypes.find((type) => type.id === period.coverTypeId)?.name;
  return (
    <RecordForm<CoverCorrectionInput>
      schema={coverCorrectionInput}
      defaults={{ coverPeriodId: period.id, reason: '' }}
      submitLabel="Correct the entry"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <p>
        The record says {name} from {dayName(period.fromOn)} ({period.evidence}). The entry is withdrawn, not
        erased, and the trail keeps it with your reason. The balance is out of date until it runs again.
      </p>
      <ChoiceField
        name="coverTypeId"
        label="What it was"
        options={[
          { value: 'none', label: 'It was not covered then: take the entry out' },
          ...optionsOf(view.coverTypes.filter((type) => type.id !== period.coverTypeId)),
        ]}
        hint="For another day or area, take the entry out and record the cover anew."
      />
      <TextField name="reason" label="How the error came to light" />
    </RecordForm>
  );
}
