import { monthName } from '#shared/calendar/month.ts';
import { causesFor } from '#shared/reconciliation/causes.ts';
import { compareNoteInput, type CompareNoteInput } from '#shared/schemas/balance.ts';
import type { ComparedRow } from '#shared/views/balance-view.ts';
import { usePlace } from '../../app/place.ts';
import { Panel } from '../../components/dialog.tsx';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { Basis, Word, type Look } from '../../components/words.tsx';
import { formatM3, formatPercent, formatSigned } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useWrite } from '../../lib/record.ts';

export const noteLooks: Record<string, Look> = { open: 'ask', explained: 'good', reconciled: 'good' };

function Numbers({ row }: { row: ComparedRow }) {
  return (
    <dl className="grid grid-cols-[150px_1fr] gap-y-1">
      <dt className="text-muted">Predicted</dt>
      <dd>{formatM3(row.predictedM3)} m³</dd>
      <dt className="text-muted">Pumped</dt>
      <dd>
        {row.measuredM3 === null ? 'not read' : `${formatM3(row.measuredM3)} m³`}
        {row.estimatedPercent > 0 && (
          <>
            , {row.estimatedPercent.toFixed(1)} % <Basis basis="estimated" />
          </>
        )}
        {row.allocatedPercent > 0 && (
          <>
            , {row.allocatedPercent.toFixed(0)} % <Basis basis="allocated" />
          </>
        )}
      </dd>
      <dt className="text-muted">Difference</dt>
      <dd>
        {row.differenceM3 === null
          ? 'none'
          : `${formatSigned(row.differenceM3)} m³${row.percent === null ? '' : ` (${formatPercent(row.percent)})`}`}
      </dd>
      <dt className="text-muted">Tolerance</dt>
      <dd>
        {row.tolerance
          ? `±${formatM3(row.tolerance.valueM3)} m³: ${row.tolerance.reason}`
          : 'none without a reading'}
      </dd>
    </dl>
  );
}

/** One month of a cell: its numbers, and what the engineer says about the gap. */
export function MonthNote({
  cell,
  row,
  onClose,
}: {
  cell: { id: string; code: string };
  row: ComparedRow | undefined;
  onClose: () => void;
}) {
  const { site, can } = usePlace();
  const save = useWrite<CompareNoteInput>(site.id, '/compare-notes');
  return (
    <Panel
      title={row ? `${cell.code}, ${monthName(row.month)}` : ''}
      isOpen={row !== undefined}
      onClose={onClose}
    >
      {row && (
        <div className="grid gap-5">
          <Numbers row={row} />
          {row.events.length > 0 && (
            <ul className="list-disc pl-5">
              {row.events.map((event) => (
                <li key={event.onDay + event.sentence}>
                  {event.when}: {event.sentence}
                </li>
              ))}
            </ul>
          )}
          {row.note && (
            <div className="box">
              <Word look={noteLooks[row.note.state] ?? 'open'}>{row.note.state}</Word>
              <p>
                <strong>{row.note.cause}.</strong> {row.note.note}
              </p>
            </div>
          )}
          {can('note:comparison') && (
            <RecordForm<CompareNoteInput>
              schema={compareNoteInput}
              defaults={{
                id: newId(),
                cellId: cell.id,
                month: row.month,
                cause: row.note?.cause ?? '',
                state: 'explained',
                note: '',
              }}
              submitLabel="Save the note"
              onSubmit={(values) => save.mutateAsync(values)}
              onDone={onClose}
            >
              <ChoiceField
                name="cause"
                label="Cause"
                options={causesFor(row.differenceM3).flatMap(({ title, causes }) =>
                  causes.map((one) => ({ value: one, label: one, group: title })),
                )}
              />
              <ChoiceField
                name="state"
                label="How it stands"
                options={[
                  { value: 'open', label: 'open: looked at, not explained yet' },
                  { value: 'explained', label: 'explained' },
                  { value: 'reconciled', label: 'reconciled: the record was corrected' },
                ]}
              />
              <TextField
                name="note"
                label="Evidence"
                hint="What was seen, by whom, and when. It goes into the report."
                isLong
              />
            </RecordForm>
          )}
        </div>
      )}
    </Panel>
  );
}
