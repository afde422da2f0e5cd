import { useFieldArray } from 'react-hook-form';
import { dayName } from '#shared/calendar/day.ts';
import {
  cellInput,
  coverChangeInput,
  wasteInput,
  type CellInput,
  type CoverChangeInput,
  type WasteInput,
} from '#shared/schemas/sites.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { FormLink, optionsOf, type SectionProps } from './site-parts.tsx';

const m2 = (text: string) => formatNumber(Number(text), 0);

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

function CellForm({ view, onDone }: SectionProps & { onDone: () => void }) {
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

function CoverForm({ view, plotId, onDone }: SectionProps & { plotId: string; onDone: () => void }) {
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
        hint="Empty: half of the available water of the new cover, our template."
        isOptional
      />
      <TextField name="evidence" label="Evidence" hint="A survey, a photo or a certificate." />
    </RecordForm>
  );
}

function WasteForm({ cellId, onDone }: { cellId: string; onDone: () => void }) {
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

function PlotRows({ view, cell }: SectionProps & { cell: SiteStructureView['cells'][number] }) {
  const { can } = usePlace();
  const plots = view.plots
    .filter((plot) => plot.cellId === cell.id)
    .sort((a, b) => (a.toOn === null ? 0 : 1) - (b.toOn === null ? 0 : 1) || (a.fromOn < b.fromOn ? -1 : 1));
  return plots.map((plot) => {
    const periods = view.coverPeriods.filter((period) => period.plotId === plot.id);
    return (
      <tr key={plot.id} className={plot.toOn ? 'text-muted' : ''}>
        <th scope="row">
          {plot.name}
          <span className="hint block">
            {plot.toOn ? `ended ${dayName(plot.toOn)}: split` : `since ${dayName(plot.fromOn)}`}
          </span>
        </th>
        <td className="r">{m2(plot.areaM2)}</td>
        <td>
          {periods.map((period) => (
            <span key={period.id} className="block">
              {view.coverTypes.find((type) => type.id === period.coverTypeId)?.name}, from{' '}
              {dayName(period.fromOn)}
              {period.toOn ? ` to ${dayName(period.toOn)}` : ''}{' '}
              <span className="hint">({period.evidence})</span>
            </span>
          ))}
        </td>
        <td>
          {!plot.toOn && can('change:site') && (
            <FormLink label="Change cover" title={`Change cover, ${cell.code} ${plot.name}`}>
              {(onDone) => <CoverForm view={view} plotId={plot.id} onDone={onDone} />}
            </FormLink>
          )}
        </td>
      </tr>
    );
  });
}

/** Cells with their dated areas, plots and cover history. */
export function CellsSection({ view }: SectionProps) {
  const { can } = usePlace();
  return (
    <Section
      title="Cells, plots and covers"
      id="cells"
      aside={
        can('change:site') && (
          <FormLink label="Add a cell">{(onDone) => <CellForm view={view} onDone={onDone} />}</FormLink>
        )
      }
    >
      {view.cells.length === 0 && (
        <Empty>
          There is no cell yet. Add the first one: its lined area, the day it opened, and the plots that make
          it up.
        </Empty>
      )}
      <div className="grid gap-5">
        {view.cells.map((cell) => {
          const area = view.cellAreas.filter((one) => one.cellId === cell.id).at(-1);
          const waste = view.wastePlaced.filter((one) => one.cellId === cell.id);
          return (
            <div key={cell.id}>
              <p className="mb-2 flex flex-wrap gap-x-4">
                <strong>
                  {cell.code} {cell.name}
                </strong>
                <span>
                  {area && `${m2(area.linedAreaM2)} m² lined`}, opened {dayName(cell.openedOn)}
                  {cell.closedOn && `, closed ${dayName(cell.closedOn)}`}
                </span>
                <span className="text-muted">
                  {waste.length
                    ? `${formatNumber(waste.reduce((sum, one) => sum + Number(one.massT), 0))} t placed in ${waste.length} months`
                    : 'no waste recorded'}
                </span>
                {can('change:site') && (
                  <FormLink label="Record waste" title={`Record waste, ${cell.code}`}>
                    {(onDone) => <WasteForm cellId={cell.id} onDone={onDone} />}
                  </FormLink>
                )}
              </p>
              <ScrollBox label={`Plots of ${cell.code}`}>
                <table className="tbl tbl-tight">
                  <caption className="sr-only">
                    Plots of {cell.code} {cell.name} and their covers
                  </caption>
                  <thead>
                    <tr>
                      <th scope="col">Plot</th>
                      <th scope="col" className="r">
                        Area, m²
                      </th>
                      <th scope="col">Covers</th>
                      <th scope="col">
                        <span className="sr-only">Act</span>
                      </th>
                    </tr>
                  </thead>
                  <tbody>
                    <PlotRows view={view} cell={cell} />
                  </tbody>
                </table>
              </ScrollBox>
            </div>
          );
        })}
      </div>
    </Section>
  );
}
