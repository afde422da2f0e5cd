import * as z from 'zod';
import { createSiteDays } from '#shared/calendar/site-days.ts';
import { estimateInput, estimateMethods, type EstimateInput } from '#shared/schemas/readings.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { Viewed } from '../../components/state.tsx';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';

const wallTime = z
  .string()
  .trim()
  .regex(/^\d{4}-\d{2}-\d{2} \d{2}:\d{2}$/, 'Enter day and time on the site’s clock, like 2026-03-04 08:00.');
const formSchema = z
  .object({ ...estimateInput.shape, fromAt: wallTime, toAt: wallTime })
  .refine((input) => input.toAt > input.fromAt, {
    path: ['toAt'],
    message: 'The span must end after it begins.',
  });

/** An estimate over a span in which a meter gave nothing: a volume, a method, its inputs and the reason. */
export function EstimateForm({ onDone }: { onDone: () => void }) {
  const { site } = usePlace();
  const structure = useRecord<SiteStructureView>(site.id, '');
  const save = useWrite<EstimateInput>(site.id, '/adjustments');
  return (
    <Viewed query={structure}>
      {(view) => {
        const days = createSiteDays(view.dayRules);
        const instant = (text: string) => {
          const read = days.readLocal(text.trim().replace(' ', 'T'));
          return read.kind === 'ok'
            ? read.observedAt
            : read.kind === 'missing-hour'
              ? read.firstInstantAfter
              : read.earlier;
        };
        return (
          <RecordForm<EstimateInput>
            schema={formSchema}
            defaults={{ id: newId(), fromAt: '', toAt: '', inputs: '', reason: '', volumeM3: '' }}
            submitLabel="Save the estimate"
            onSubmit={(values) =>
              save.mutateAsync({ ...values, fromAt: instant(values.fromAt), toAt: instant(values.toAt) })
            }
            onDone={onDone}
          >
            <ChoiceField
              name="meterId"
              label="Meter"
              options={view.meters.map((meter) => ({
                value: meter.id,
                label: `${meter.code} ${meter.name}`,
              }))}
            />
            <TextField
              name="fromAt"
              label="From, day and time on the site’s clock"
              hint="Like 2026-03-04 08:00. Readings before and after the span stay as they are."
            />
            <TextField name="toAt" label="To, day and time on the site’s clock" />
            <TextField
              name="volumeM3"
              label="Volume over the span, in cubic metres"
              unit="m³"
              inputMode="decimal"
            />
            <ChoiceField
              name="method"
              label="Method"
              options={Object.entries(estimateMethods).map(([value, label]) => ({ value, label }))}
            />
            <TextField
              name="inputs"
              label="What it rests on"
              hint="The numbers of the method: hours and rate, levels, days compared."
              isLong
            />
            <TextField
              name="reason"
              label="Reason"
              hint="Why the meter gave nothing. It is printed in the report."
              isLong
            />
          </RecordForm>
        );
      }}
    </Viewed>
  );
}
