import { useState } from 'react';
import { useFieldArray, useFormContext } from 'react-hook-form';
import { monthName } from '#shared/calendar/month.ts';
import {
  calibratedNames,
  calibratedRegister,
  type CalibratedName,
} from '#shared/calibration/calibrated-parameters.ts';
import type { CalibrationPart } from '#shared/calibration/calibrate.ts';
import { counted } from '#shared/count-words.ts';
import type { ParameterSetInput } from '#shared/schemas/balance.ts';
import { calibrationInput, type CalibrationInput } from '#shared/schemas/forecast.ts';
import type { ParameterSetView } from '#shared/views/balance-view.ts';
import type { CalibrationView } from '#shared/views/forecast-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { Word } from '../../components/words.tsx';
import { formatM3, formatNumber, formatPercent } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';

const firstChosen: readonly CalibratedName[] = ['petFactor', 'recessionPerMonth', 'channelledFraction'];

const choiceOf = (name: CalibratedName) => {
  const { low, high } = calibratedRegister[name];
  return { name, low: String(low), high: String(high) };
};

function BoundFields() {
  const { watch } = useFormContext<CalibrationInput>();
  const { fields, append, remove } = useFieldArray<CalibrationInput>({ name: 'choices' });
  const chosen = watch('choices').map((choice) => choice.name);
  return (
    <>
      {fields.map((field, index) => {
        const { label, unit } = calibratedRegister[chosen[index] ?? field.name];
        return (
          <fieldset key={field.id} className="box grid gap-2">
            <legend className="font-semibold px-1">{label}</legend>
            <div className="grid grid-cols-2 gap-3">
              <TextField name={`choices.${index}.low`} label="From" inputMode="decimal" unit={unit} />
              <TextField name={`choices.${index}.high`} label="to" inputMode="decimal" unit={unit} />
            </div>
            <p>
              <button type="button" className="link" onClick={() => remove(index)}>
                Leave it as it is
              </button>
            </p>
          </fieldset>
        );
      })}
      <p className="flex flex-wrap gap-2">
        {calibratedNames
          .filter((name) => !chosen.includes(name))
          .map((name) => (
            <button
              key={name}
              type="button"
              className="btn btn-second"
              onClick={() => append(choiceOf(name))}
            >
              Fit the {calibratedRegister[name].label.toLowerCase()} too
            </button>
          ))}
      </p>
    </>
  );
}

/** Which cell and which parameters, each within its bounds. */
function ChoiceForm({
  cells,
  onFound,
}: {
  cells: { id: string; code: string; name: string }[];
  onFound: (found: CalibrationView) => void;
}) {
  const { site } = usePlace();
  const run = useWrite<CalibrationInput, CalibrationView>(site.id, '/calibrations', { onDone: onFound });
  return (
    <RecordForm<CalibrationInput>
      schema={calibrationInput}
      defaults={{ cellId: '', choices: firstChosen.map(choiceOf) }}
      submitLabel="Fit to what was pumped"
      onSubmit={(values) => run.mutateAsync(values)}
    >
      <p>
        The parameters are moved within their bounds until the months of one cell fit. The last quarter of the
        months is held back as a test. Nothing changes until you accept the result.
      </p>
      <ChoiceField
        name="cellId"
        label="Cell"
        options={cells.map((cell) => ({ value: cell.id, label: `${cell.code} ${cell.name}` }))}
      />
      <BoundFields />
    </RecordForm>
  );
}

function Fit({ found }: { found: CalibrationView }) {
  const parts: [string, CalibrationPart][] = [
    ['Fitted', found.fitted],
    ['Held back', found.heldBack],
  ];
  const or = (value: number | null, format: (value: number) => string) =>
    value === null ? 'not defined' : format(value);
  return (
    <table className="tbl tbl-tight sheet">
      <caption className="sr-only">Fit before and after, on the fitted and the held-back months</caption>
      <thead>
        <tr>
          <th scope="col">Months</th>
          <th scope="col" className="r">
            PBIAS
          </th>
          <th scope="col" className="r">
            RMSE, m³
          </th>
          <th scope="col" className="r">
            Nash–Sutcliffe
          </th>
        </tr>
      </thead>
      <tbody>
        {parts.flatMap(([name, part]) =>
          (['before', 'after'] as const).map((when) => (
            <tr key={name + when}>
              <th scope="row">
                {name}, {when} <span className="hint">n = {part.monthCount}</span>
              </th>
              <td className="r">{or(part[when].pbiasPercent, formatPercent)}</td>
              <td className="r">{or(part[when].rmse, formatM3)}</td>
              <td className="r">{or(part[when].nashSutcliffe, (value) => formatNumber(value, 2))}</td>
            </tr>
          )),
        )}
      </tbody>
    </table>
  );
}

function Values({ found }: { found: CalibrationView }) {
  return (
    <table className="tbl tbl-tight sheet">
      <caption className="sr-only">Parameters before and after</caption>
      <thead>
        <tr>
          <th scope="col">Parameter</th>
          <th scope="col" className="r">
            Before
          </th>
          <th scope="col" className="r">
            After
          </th>
          <th scope="col">Bounds</th>
        </tr>
      </thead>
      <tbody>
        {found.values.map((value) => (
          <tr key={value.name}>
            <th scope="row">{calibratedRegister[value.name].label}</th>
            <td className="r">{formatNumber(value.before, 3)}</td>
            <td className="r font-semibold">{formatNumber(value.after, 3)}</td>
            <td>
              {value.low} to {value.high}
              {value.isAtBound && <Word look="ask">at its bound</Word>}
            </td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function Proposal({
  found,
  current,
  onDone,
}: {
  found: CalibrationView;
  current: ParameterSetView;
  onDone: () => void;
}) {
  const { site } = usePlace();
  const accept = useWrite<ParameterSetInput>(site.id, '/parameter-sets', { onDone });
  const changed = Object.fromEntries(
    found.values.map(({ name, after }) => [name, Number(after.toPrecision(4))]),
  );
  return (
    <div className="grid gap-5">
      <p>
        {found.cell.code} {found.cell.name}, {monthName(found.firstMonth)} to {monthName(found.lastMonth)};
        held back from {monthName(found.heldBackFrom)}
        {found.leftOutCount > 0 &&
          `; ${counted(found.leftOutCount, 'month', 'months')} left out: nothing was read`}
        .
      </p>
      {found.doubts.length > 0 && (
        <div className="box box-warn">
          <p className="font-semibold">Why it should not be trusted yet</p>
          <ul className="list-disc pl-5">
            {found.doubts.map((doubt) => (
              <li key={doubt}>{doubt}</li>
            ))}
          </ul>
        </div>
      )}
      <Values found={found} />
      <Fit found={found} />
      {accept.error && (
        <p role="alert" className="error-text">
          ⚠ {accept.error.document.detail}
        </p>
      )}
      <p className="flex flex-wrap gap-3">
        <button
          type="button"
          className="btn"
          disabled={accept.isPending}
          onClick={() =>
            accept.mutate({
              id: newId(),
              name: `Fitted to ${found.cell.code}`,
              values: { ...current.values, ...changed },
            })
          }
        >
          Accept as a new set
        </button>
        <button type="button" className="btn btn-second" onClick={onDone}>
          Drop it
        </button>
      </p>
      <p className="hint">
        The new set becomes the current one and the working run follows; frozen runs stay. It holds for the
        whole site, not for {found.cell.code} alone.
      </p>
    </div>
  );
}

/** Fitting parameters to measured months: a proposal that an engineer accepts or drops. */
export function CalibrationPanel({
  cells,
  current,
  isOpen,
  onClose,
}: {
  cells: { id: string; code: string; name: string }[];
  current: ParameterSetView;
  isOpen: boolean;
  onClose: () => void;
}) {
  const [found, setFound] = useState<CalibrationView | null>(null);
  const close = () => {
    setFound(null);
    onClose();
  };
  return (
    <Panel title="Fit to what was pumped" isOpen={isOpen} onClose={close}>
      {isOpen &&
        (found ? (
          <Proposal found={found} current={current} onDone={close} />
        ) : (
          <ChoiceForm cells={cells} onFound={setFound} />
        ))}
    </Panel>
  );
}
