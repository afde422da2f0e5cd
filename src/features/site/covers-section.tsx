import { useFormContext } from 'react-hook-form';
import {
  coverTypeChangeInput,
  coverTypeInput,
  type CoverTypeChangeInput,
  type CoverTypeInput,
} from '#shared/schemas/sites.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { coverKindNames, coverKinds, runoffShareTable } from '#shared/water-balance/cover-types.ts';
import { parameterTemplate } from '#shared/water-balance/engine-input.ts';
import { DefectFields } from '../../components/defect-fields.tsx';
import { usePlace } from '../../app/place.ts';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Template, Word } from '../../components/words.tsx';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';
import { FormLink, type SectionProps } from './site-parts.tsx';

type CoverType = SiteStructureView['coverTypes'][number];

/** Leakage through defects instead of a share, with the head in the cover's own drain. */
function MembraneLeakage() {
  const { watch, setValue } = useFormContext<CoverTypeInput>();
  const hasDefects = Boolean(watch('membraneDefects'));
  return (
    <>
      {hasDefects && <DefectFields prefix="membraneDefects" />}
      <p>
        <button
          type="button"
          className="link"
          onClick={() => setValue('membraneDefects', hasDefects ? null : parameterTemplate.liner)}
        >
          {hasDefects ? 'Use the share instead' : 'Compute the leakage through defects instead of a share'}
        </button>
      </p>
    </>
  );
}

/** The published runoff shares beside the boxes they go into. */
function RunoffTable() {
  return (
    <table className="tbl tbl-tight sheet">
      <caption className="!p-2 text-sm">
        Runoff share by soil and slope: Fenn, Hanley and DeGeare 1975, Table 3 (from memory)
      </caption>
      <thead>
        <tr>
          <th scope="col">Soil</th>
          {runoffShareTable.slopes.map((slope) => (
            <th key={slope} scope="col" className="r">
              {slope}
            </th>
          ))}
        </tr>
      </thead>
      <tbody>
        {runoffShareTable.rows.map(({ soil, shares }) => (
          <tr key={soil}>
            <th scope="row">{soil}</th>
            {shares.map((share) => (
              <td key={share} className="r">
                {share}
              </td>
            ))}
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function CoverFields() {
  return (
    <>
      <TextField name="name" label="Name" />
      <TextField
        name="availableWaterMm"
        label="Available water of the soil, in millimetres"
        unit="mm"
        inputMode="decimal"
        hint="mm/m of the soil × rooted depth: sandy loam 150, silt loam 200, clay loam 250 mm/m (Thornthwaite and Mather 1957, Table 10). 0: no soil store."
      />
      <TextField
        name="membranePassFraction"
        label="Share that passes the membrane"
        inputMode="decimal"
        hint="Share of one; empty without a membrane."
        isOptional
      />
      <MembraneLeakage />
      <RunoffTable />
      <TextField name="runoffCoefficientWet" label="Runoff share, wet season" inputMode="decimal" />
      <TextField name="runoffCoefficientDry" label="Runoff share, dry season" inputMode="decimal" />
      <TextField
        name="curveNumber"
        label="Curve number, average condition"
        inputMode="decimal"
        hint="Used where the parameter set asks for it and daily rain exists (TR-55)."
        isOptional
      />
      <ChoiceField
        name="runoffDestination"
        label="Runoff goes to"
        options={[
          { value: 'storm-water', label: 'storm water' },
          { value: 'leachate', label: 'leachate (contact water)' },
        ]}
      />
      <TextField name="petFactor" label="Factor on potential evapotranspiration" inputMode="decimal" />
      <TextField name="source" label="Source of these values" isLong />
    </>
  );
}

function NewCoverForm({ onDone }: { onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<CoverTypeInput>(site.id, '/cover-types');
  return (
    <RecordForm<CoverTypeInput>
      schema={coverTypeInput}
      defaults={{
        id: newId(),
        name: '',
        availableWaterMm: '',
        membranePassFraction: '',
        membraneDefects: null,
        runoffCoefficientWet: '',
        runoffCoefficientDry: '',
        curveNumber: '',
        petFactor: '1',
        source: '',
      }}
      submitLabel="Add the cover"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <ChoiceField
        name="kind"
        label="Kind"
        options={coverKinds.map((kind) => ({ value: kind, label: coverKindNames[kind] }))}
      />
      <CoverFields />
    </RecordForm>
  );
}

function CoverValuesForm({ type, onDone }: { type: CoverType; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<CoverTypeChangeInput>(site.id, `/cover-types/${type.id}`, { method: 'PUT' });
  return (
    <RecordForm<CoverTypeChangeInput>
      schema={coverTypeChangeInput}
      defaults={{
        name: type.name,
        availableWaterMm: type.availableWaterMm,
        membranePassFraction: type.membranePassFraction ?? '',
        membraneDefects: type.membraneDefects,
        runoffCoefficientWet: type.runoffCoefficientWet,
        runoffCoefficientDry: type.runoffCoefficientDry,
        curveNumber: type.curveNumber ?? '',
        runoffDestination: type.runoffDestination,
        petFactor: type.petFactor,
        source: type.source,
        reason: '',
      }}
      submitLabel="Save the values"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <p>
        The values hold for all ground under this cover, also in the past. The working run follows; frozen
        runs keep theirs.
      </p>
      <CoverFields />
      <TextField name="reason" label="Why the values change" />
    </RecordForm>
  );
}

function Confirm({ id, name }: { id: string; name: string }) {
  const { site } = usePlace();
  const confirm = useWrite<Record<string, never>>(site.id, `/cover-types/${id}/confirmation`);
  return (
    <button
      type="button"
      className="link block"
      aria-label={`Confirm for this site: ${name}`}
      onClick={() => confirm.mutate({})}
    >
      Confirm for this site
    </button>
  );
}

/** Cover types: four properties, each with its source; templates until an engineer confirms them. */
export function CoversSection({ view }: SectionProps) {
  const { can } = usePlace();
  return (
    <Section
      title="Cover types"
      id="covers"
      aside={
        can('change:site') && (
          <FormLink label="Add a cover type">{(onDone) => <NewCoverForm onDone={onDone} />}</FormLink>
        )
      }
    >
      <ScrollBox label="Cover types">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Cover types and their parameters</caption>
          <thead>
            <tr>
              <th scope="col">Cover</th>
              <th scope="col" className="r">
                Available water, mm
              </th>
              <th scope="col" className="r">
                Passes membrane
              </th>
              <th scope="col" className="r">
                Runoff share, wet / dry
              </th>
              <th scope="col">Runoff to</th>
              <th scope="col" className="r">
                PET factor
              </th>
              <th scope="col">State</th>
            </tr>
          </thead>
          <tbody>
            {view.coverTypes.map((type) => (
              <tr key={type.id}>
                <th scope="row">
                  {type.name}
                  <span className="hint block max-w-[44ch]">{type.source}</span>
                </th>
                <td className="r">{type.availableWaterMm}</td>
                <td className="r">
                  {type.membraneDefects
                    ? `by ${type.membraneDefects.defectsPerHa} defects/ha`
                    : (type.membranePassFraction ?? 'no membrane')}
                </td>
                <td className="r">
                  {type.runoffCoefficientWet} / {type.runoffCoefficientDry}
                  {type.curveNumber && <span className="hint block">curve number {type.curveNumber}</span>}
                </td>
                <td>{type.runoffDestination === 'leachate' ? 'leachate' : 'storm water'}</td>
                <td className="r">{type.petFactor}</td>
                <td>
                  {type.confirmedAt ? (
                    <Word look="good">Confirmed</Word>
                  ) : (
                    <>
                      <Template />
                      {can('change:parameters') && <Confirm id={type.id} name={type.name} />}
                    </>
                  )}
                  {can('change:parameters') && (
                    <FormLink label="Change" title={`Values of ${type.name}`}>
                      {(onDone) => <CoverValuesForm type={type} onDone={onDone} />}
                    </FormLink>
                  )}
                </td>
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
    </Section>
  );
}
