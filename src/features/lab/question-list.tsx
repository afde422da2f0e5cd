import { useState } from 'react';
import { qualifierMeaningNames, qualifierMeanings } from '#shared/lab/qualifier-meanings.ts';
import type { LabAnswerInput } from '#shared/schemas/lab.ts';
import type { LabImportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { useWrite } from '../../lib/record.ts';

type Row = LabImportView['rows'][number];

interface Question {
  key: string;
  sentence: string;
  rows: number[];
  answer: {
    kind: LabAnswerInput['kind'];
    fromText: string;
    label: string;
    options: { value: string; label: string }[];
  } | null;
}

const units = ['mg/L', 'µg/L', 'ng/L', 'g/L', 'pH', 'µS/cm', 'mS/cm', '°C', 'NTU', 'CFU/100 mL'];

function answerOf(row: Row, view: LabImportView): Question['answer'] {
  const question = row.question!;
  const points = view.points.map((one) => ({ value: one.id, label: `${one.code} ${one.name}` }));
  if (question.kind === 'sample-point' && row.pointText)
    return { kind: 'sample-point', fromText: row.pointText, label: 'It is', options: points };
  if (question.kind === 'analyte')
    return {
      kind: 'analyte',
      fromText: row.analyteText,
      label: 'It is',
      options: view.analytes.map((one) => ({
        value: one.id,
        label: one.basis ? `${one.name} as ${one.basis}` : one.name,
      })),
    };
  if (question.kind === 'unit')
    return {
      kind: 'unit',
      fromText: row.unitText || row.analyteText,
      label: 'The unit is',
      options: units.map((unit) => ({ value: unit, label: unit })),
    };
  if (question.kind === 'qualifier') {
    const letter = /"([^"]+)"/.exec(question.text)?.[1] ?? row.qualifierText;
    return {
      kind: 'qualifier',
      fromText: letter,
      label: `${letter} means`,
      options: qualifierMeanings.map((value) => ({ value, label: qualifierMeaningNames[value] })),
    };
  }
  if (question.kind === 'date' && question.text.includes('two ways'))
    return {
      kind: 'date-order',
      fromText: row.sampledText,
      label: 'In this file',
      options: [
        { value: 'day-first', label: 'the day comes first' },
        { value: 'month-first', label: 'the month comes first' },
      ],
    };
  if (question.kind === 'equal-to-limit')
    return {
      kind: 'equal-to-limit',
      fromText: row.resultText,
      label: 'In this file such values',
      options: [
        { value: 'below', label: 'were not found: below the limit' },
        { value: 'measured', label: 'were measured' },
      ],
    };
  return null;
}

/** Answers that hold for the whole file, whatever the text of the row. */
const fileKinds: readonly LabAnswerInput['kind'][] = ['date-order', 'equal-to-limit'];

/** One question for all rows that ask the same. */
export function questionsOf(view: LabImportView): Question[] {
  const questions = new Map<string, Question>();
  for (const row of view.rows.filter((one) => one.state === 'held' && one.question)) {
    const answer = answerOf(row, view);
    const key = answer
      ? `${answer.kind} ${fileKinds.includes(answer.kind) ? '' : answer.fromText}`
      : `${row.sheet} ${row.rowNumber} ${row.cell}`;
    const known = questions.get(key);
    if (known) known.rows.push(row.rowNumber);
    else questions.set(key, { key, sentence: row.question!.text, rows: [row.rowNumber], answer });
  }
  return [...questions.values()];
}

function QuestionItem({ question, importId }: { question: Question; importId: string }) {
  const { site } = usePlace();
  const [value, setValue] = useState('');
  const answer = useWrite<LabAnswerInput>(site.id, `/lab-imports/${importId}/answers`);
  const id = `answer-${question.key.replaceAll(/\W+/g, '-')}`;
  return (
    <li>
      <p>
        <strong>
          {question.rows.length === 1
            ? `Row ${question.rows[0]}`
            : `${question.rows.length} results, the first in row ${question.rows[0]}`}
          .
        </strong>{' '}
        {question.sentence}
      </p>
      {question.answer ? (
        <div className="flex flex-wrap gap-2 items-end mt-2">
          <div className="flex-1 min-w-[200px]">
            <label className="label" htmlFor={id}>
              {question.answer.label}
            </label>
            <select
              id={id}
              className="input"
              value={value}
              onChange={(event) => setValue(event.target.value)}
            >
              <option value="">Choose, or leave it held</option>
              {question.answer.options.map((one) => (
                <option key={one.value} value={one.value}>
                  {one.label}
                </option>
              ))}
            </select>
          </div>
          <button
            type="button"
            className="btn btn-second"
            disabled={answer.isPending}
            onClick={() =>
              value &&
              answer.mutate({
                kind: question.answer!.kind,
                fromText: question.answer!.fromText,
                toValue: value,
              })
            }
          >
            Use this answer
          </button>
          {answer.error && (
            <p role="alert" className="error-text w-full">
              ⚠ {answer.error.document.detail}
            </p>
          )}
        </div>
      ) : (
        <p className="hint">
          It stays held with this upload. Correct the sheet, or ask the laboratory, and upload it again.
        </p>
      )}
    </li>
  );
}

/** What holds rows back. An answer is remembered for this laboratory. */
export function QuestionList({ view }: { view: LabImportView }) {
  const questions = questionsOf(view);
  if (!questions.length) return <p className="text-muted">No row is held.</p>;
  return (
    <ul className="sheet lines px-4 list-none">
      {questions.map((question) => (
        <QuestionItem key={question.key} question={question} importId={view.id} />
      ))}
    </ul>
  );
}
