import { useState } from 'react';
import { limitInput, permitInput, type LimitInput, type PermitInput } from '#shared/schemas/lab.ts';
import type { LimitChoicesView, LimitsView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { CheckField, ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { Template, Word } from '../../components/words.tsx';
import { formatInstant } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';
import { limitWords, statisticNames } from './limit-words.ts';

const ruleNames = {
  zero: 'zero',
  half: 'half of the detection limit',
  full: 'the full detection limit',
  carried: 'the full limit, “<” carried through',
};

function PermitForm({ onDone }: { onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<PermitInput>(site.id, '/permits');
  return (
    <RecordForm<PermitInput>
      schema={permitInput}
      defaults={{ id: newId(), number: '', authority: '', fromOn: '', toOn: '' }}
      submitLabel="Save the permit"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField name="number" label="Number of the permit" />
      <TextField name="authority" label="Authority" />
      <ChoiceField
        name="regime"
        label="Where the water goes"
        options={[
          { value: 'direct', label: 'into a water body' },
          { value: 'sewer', label: 'into a sewer' },
          { value: 'other', label: 'elsewhere' },
        ]}
      />
      <TextField name="fromOn" label="First day" hint="Like 2026-01-01." />
      <TextField name="toOn" label="First day after it ends" isOptional />
    </RecordForm>
  );
}

function LimitForm({ choices, onDone }: { choices: LimitChoicesView; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<LimitInput>(site.id, '/limits');
  return (
    <RecordForm<LimitInput>
      schema={limitInput}
      defaults={{
        id: newId(),
        fraction: '',
        quantity: 'concentration',
        valueText: '',
        lowText: '',
        highText: '',
        unit: 'mg/L',
        isInclusive: true,
        samplesMin: '4',
        decimals: '2',
        citation: '',
        noticeHours: '',
        writtenNoticeDays: '',
        resampleDays: '',
        fromOn: '',
        toOn: '',
        belowDetectionRule: 'half',
      }}
      submitLabel="Save the limit"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <ChoiceField
        name="permitId"
        label="Permit"
        options={choices.permits.map((one) => ({ value: one.id, label: one.number }))}
      />
      <ChoiceField
        name="samplePointId"
        label="Sample point"
        options={choices.samplePoints.map((one) => ({ value: one.id, label: `${one.code} ${one.name}` }))}
      />
      <ChoiceField
        name="analyteId"
        label="Parameter"
        options={choices.analytes.map((one) => ({ value: one.id, label: one.name }))}
      />
      <TextField
        name="fraction"
        label="Fraction"
        hint="As the permit says: total, dissolved, or empty."
        isOptional
      />
      <ChoiceField
        name="statistic"
        label="How the limit is meant"
        options={Object.entries(statisticNames).map(([value, label]) => ({ value, label }))}
      />
      <ChoiceField
        name="quantity"
        label="What is limited"
        options={[
          { value: 'concentration', label: 'concentration' },
          { value: 'load', label: 'load' },
        ]}
      />
      <TextField
        name="valueText"
        label="Limit, as the permit prints it"
        hint="0.20 and 0.2 are not the same: the digits decide the rounding. Empty for a range."
        inputMode="decimal"
        isOptional
      />
      <TextField name="lowText" label="Lower end of a range" inputMode="decimal" isOptional />
      <TextField name="highText" label="Upper end of a range" inputMode="decimal" isOptional />
      <TextField name="unit" label="Unit" />
      <TextField name="decimals" label="Decimals of the limit" inputMode="numeric" />
      <CheckField name="isInclusive" label="A value equal to the limit complies" />
      <ChoiceField
        name="flowPlaceId"
        label="Place whose flow makes the load"
        isOptional
        options={choices.places.map((one) => ({ value: one.id, label: one.name }))}
      />
      <TextField name="samplesMin" label="Samples required a month" inputMode="numeric" />
      <ChoiceField
        name="belowDetectionRule"
        label="A value below detection counts as"
        options={Object.entries(ruleNames).map(([value, label]) => ({ value, label }))}
      />
      <TextField
        name="noticeHours"
        label="Notice by voice within"
        unit="hours"
        inputMode="numeric"
        isOptional
      />
      <TextField
        name="writtenNoticeDays"
        label="Written notice within"
        unit="days"
        inputMode="numeric"
        isOptional
      />
      <TextField
        name="resampleDays"
        label="Repeat sample within"
        unit="days"
        inputMode="numeric"
        isOptional
      />
      <TextField name="citation" label="Page or part of the permit" />
      <TextField name="fromOn" label="First day" hint="Like 2026-01-01." />
      <TextField name="toOn" label="First day after it ends" isOptional />
    </RecordForm>
  );
}

function Confirm({ limitId, name }: { limitId: string; name: string }) {
  const { site } = usePlace();
  const confirm = useWrite<Record<string, never>>(site.id, `/limits/${limitId}/confirmation`);
  return (
    <button
      type="button"
      className="link"
      aria-label={`Confirm against the permit: ${name}`}
      onClick={() => confirm.mutate({})}
    >
      Confirm against the permit
    </button>
  );
}

/** Permits and their limits; a limit is a template until the manager confirms it. */
export function Permits({ view }: { view: LimitsView }) {
  const { site, can } = usePlace();
  const choices = useRecord<LimitChoicesView>(site.id, '/limit-choices');
  const [open, setOpen] = useState<'permit' | 'limit' | null>(null);
  const limits = [...new Map(view.verdicts.map((one) => [one.limit.id, one])).values()];
  const close = () => setOpen(null);
  return (
    <Section
      title="Permits and limits"
      aside={
        can('change:permit') && (
          <span className="flex gap-4 no-print">
            <button type="button" className="link" onClick={() => setOpen('permit')}>
              Add a permit
            </button>
            <button type="button" className="link" onClick={() => setOpen('limit')}>
              Add a limit
            </button>
          </span>
        )
      }
    >
      {view.permits.length === 0 ? (
        <Empty>No permit is entered yet. Nothing can be judged without one.</Empty>
      ) : (
        <>
          <p className="mb-3">
            {view.permits
              .map(
                (permit) =>
                  `${permit.number}, ${permit.authority}, from ${permit.fromOn}${permit.toOn ? ` to ${permit.toOn}` : ''}`,
              )
              .join('; ')}
            .
          </p>
          <ScrollBox label="Limits">
            <table className="tbl tbl-tight">
              <caption className="sr-only">Limits in force in the quarter</caption>
              <thead>
                <tr>
                  <th scope="col">Point, parameter</th>
                  <th scope="col">Limit</th>
                  <th scope="col">Below detection counts as</th>
                  <th scope="col">Permit part</th>
                  <th scope="col">Confirmed</th>
                </tr>
              </thead>
              <tbody>
                {limits.map(({ limit, pointCode, analyteName }) => (
                  <tr key={limit.id}>
                    <th scope="row">
                      {pointCode}, {analyteName}
                      {limit.fraction && ` ${limit.fraction}`}
                    </th>
                    <td>
                      {limitWords(limit)}, {statisticNames[limit.statistic as keyof typeof statisticNames]}
                    </td>
                    <td>{ruleNames[limit.belowDetectionRule as keyof typeof ruleNames]}</td>
                    <td>{limit.citation}</td>
                    <td>
                      {limit.confirmedAt ? (
                        <>
                          <Word look="good">Confirmed</Word>
                          <span className="hint block">
                            {limit.confirmedBy}, {formatInstant(limit.confirmedAt)}
                          </span>
                        </>
                      ) : (
                        <>
                          <Template />
                          {can('confirm:limit') && (
                            <span className="block">
                              <Confirm limitId={limit.id} name={`${analyteName}, ${limitWords(limit)}`} />
                            </span>
                          )}
                        </>
                      )}
                    </td>
                  </tr>
                ))}
              </tbody>
            </table>
          </ScrollBox>
        </>
      )}
      <Panel title="Add a permit" isOpen={open === 'permit'} onClose={close}>
        <PermitForm onDone={close} />
      </Panel>
      <Panel title="Add a limit" isOpen={open === 'limit'} onClose={close}>
        <Viewed query={choices}>{(data) => <LimitForm choices={data} onDone={close} />}</Viewed>
      </Panel>
    </Section>
  );
}
