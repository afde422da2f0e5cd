import { voidInput } from '#shared/schemas/readings.ts';
import { usePlace } from '../../app/place.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';

const paths = { reading: 'readings', ticket: 'loads-out' } as const;
export type VoidableKind = keyof typeof paths;
export const isVoidable = (kind: string): kind is VoidableKind => kind in paths;

/** Takes a reading or a ticket out of the totals, with a reason; what was recorded stays readable. */
export function VoidFact({ kind, id, onDone }: { kind: VoidableKind; id: string; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<{ id: string; reason: string }>(site.id, `/${paths[kind]}/${id}/void`);
  return (
    <RecordForm<{ id: string; reason: string }>
      schema={voidInput}
      defaults={{ id: newId(), reason: '' }}
      submitLabel={`Void this ${kind}`}
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <TextField
        name="reason"
        label="Reason"
        hint="It leaves the totals and stays in the record, with this reason."
        isLong
      />
    </RecordForm>
  );
}
