import { ChoiceField, TextField } from './form.tsx';

/** A membrane with defects, the soil under it and the drain over it. @param prefix where the values sit in the form */
export function DefectFields({ prefix }: { prefix: string }) {
  return (
    <fieldset className="box grid gap-4">
      <legend className="font-semibold px-1">Membrane, soil under it, drain over it</legend>
      <TextField
        name={`${prefix}.defectsPerHa`}
        label="Defects a hectare"
        inputMode="decimal"
        hint="Common practice is 1 to 10 after a survey; no source."
      />
      <TextField
        name={`${prefix}.defectAreaM2`}
        label="Area of one defect, in square metres"
        unit="m²"
        hint="0.0001 m² is 1 cm². The formula holds from 0.5 to 25 mm across (from memory)."
      />
      <ChoiceField
        name={`${prefix}.contact`}
        label="Contact of membrane and soil"
        options={[
          { value: 'good', label: 'good' },
          { value: 'poor', label: 'poor' },
        ]}
      />
      <TextField
        name={`${prefix}.soilConductivityMPerS`}
        label="Conductivity of the soil under the membrane"
        unit="m/s"
        hint="Like 1e-9."
      />
      <TextField
        name={`${prefix}.soilThicknessM`}
        label="Thickness of that soil, in metres"
        unit="m"
        inputMode="decimal"
      />
      <TextField
        name={`${prefix}.drainLengthM`}
        label="Horizontal length of the drain to its pipe"
        unit="m"
        inputMode="decimal"
      />
      <TextField
        name={`${prefix}.slope`}
        label="Slope of the drain, rise over run"
        inputMode="decimal"
        hint="2 % is 0.02."
      />
      <TextField
        name={`${prefix}.drainConductivityMPerS`}
        label="Conductivity of the drain"
        unit="m/s"
        hint="Like 0.001."
      />
    </fieldset>
  );
}
