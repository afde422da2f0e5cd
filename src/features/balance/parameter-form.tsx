import { useFormContext } from 'react-hook-form';
import { parameterSetInput, type ParameterSetInput } from '#shared/schemas/balance.ts';
import type { BalanceParameters, ParameterSetView } from '#shared/views/balance-view.ts';
import {
  leakMethodNames,
  petMethodNames,
  runoffMethodNames,
  soilLawNames,
} from '#shared/water-balance/method-names.ts';
import { usePlace } from '../../app/place.ts';
import { DefectFields } from '../../components/defect-fields.tsx';
import { CheckField, ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';

const optionsOf = (names: Record<string, string>) =>
  Object.entries(names).map(([value, label]) => ({ value, label }));

function PetFields() {
  const method = useFormContext().watch('values.petMethod') as BalanceParameters['petMethod'];
  return (
    <>
      <ChoiceField
        name="values.petMethod"
        label="Potential evapotranspiration"
        options={optionsOf(petMethodNames)}
        hint="Available water of the covers and the method belong together: look at both when one changes. Thornthwaite tends to be low."
      />
      {method === 'thornthwaite' && (
        <ChoiceField
          name="values.hotMonths"
          label="Months from 26.5 °C"
          options={[
            { value: 'table', label: 'table form (Willmott, Rowe and Mintz 1985)' },
            { value: 'power', label: 'power law throughout' },
          ]}
        />
      )}
      {method === 'pan' && (
        <TextField
          name="values.panCoefficient"
          label="Pan coefficient"
          inputMode="decimal"
          hint="0.35 to 0.85 by wind, humidity and fetch: FAO-56 Table 5."
        />
      )}
      {method === 'penman-monteith' && (
        <>
          <TextField
            name="values.windMPerS"
            label="Wind at 2 m where none is recorded"
            unit="m/s"
            inputMode="decimal"
            hint="2 m/s where nothing is known: FAO-56 p. 63."
          />
          <TextField
            name="values.radiationCoefficient"
            label="Radiation coefficient where no sunshine is recorded"
            inputMode="decimal"
            hint="0.16 inland, 0.19 on a coast: FAO-56 eq. 50."
          />
        </>
      )}
    </>
  );
}

function LinerFields() {
  const method = useFormContext().watch('values.leakMethod') as BalanceParameters['leakMethod'];
  return (
    <>
      <ChoiceField
        name="values.leakMethod"
        label="Leakage of the liner"
        options={optionsOf(leakMethodNames)}
      />
      {method === 'defects' ? (
        <DefectFields prefix="values.liner" />
      ) : (
        <TextField name="values.leakFraction" label="Share of drained water that leaks" inputMode="decimal" />
      )}
    </>
  );
}

/** Every parameter of the model; saving makes the next version, the one before stays. */
export function ParameterForm({ current, onDone }: { current: ParameterSetView; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<ParameterSetInput>(site.id, '/parameter-sets');
  return (
    <RecordForm<ParameterSetInput>
      schema={parameterSetInput}
      defaults={{
        id: newId(),
        name: current.name === 'Template' ? 'Site set' : current.name,
        values: current.values,
      }}
      submitLabel="Save as a new set"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="name" label="Name of the set" />
      <PetFields />
      <ChoiceField name="values.runoffMethod" label="Runoff" options={optionsOf(runoffMethodNames)} />
      <ChoiceField name="values.soilLaw" label="Soil law" options={optionsOf(soilLawNames)} />
      <TextField name="values.runoffFactor" label="Factor on every runoff" inputMode="decimal" />
      <TextField name="values.petFactor" label="Factor on potential evapotranspiration" inputMode="decimal" />
      <TextField
        name="values.recessionPerMonth"
        label="Recession constant of the waste"
        unit="1/month"
        inputMode="decimal"
        hint="Template 0.5: our choice, no published constant exists."
      />
      <TextField
        name="values.channelledFraction"
        label="Channelled share of percolation"
        inputMode="decimal"
      />
      <TextField
        name="values.deficitFactor"
        label="Factor on the deficit of placed waste"
        inputMode="decimal"
      />
      <LinerFields />
      <CheckField name="values.snow.isOn" label="Snow" />
      <TextField name="values.snow.tSnowC" label="All snow at or below" unit="°C" />
      <TextField name="values.snow.tRainC" label="All rain at or above" unit="°C" />
      <TextField
        name="values.snow.meltMaxFraction"
        label="Largest share of the snow that melts in a month"
        inputMode="decimal"
      />
      <TextField
        name="values.snow.meltMmPerCDay"
        label="Melt of a day, where daily temperatures exist"
        unit="mm/°C"
        inputMode="decimal"
        hint="2.74 where nothing else is known: NEH-630 chapter 11 (second-hand)."
      />
      <CheckField name="values.isFrostOn" label="Frozen ground stops percolation" />
      <TextField name="values.tFrostC" label="Frozen at or below" unit="°C" />
      <CheckField name="values.isSpunUp" label="Spin the first soil store up on the first year" />
      <p>
        <button type="button" className="link" onClick={onDone}>
          Leave as it is
        </button>
      </p>
    </RecordForm>
  );
}
