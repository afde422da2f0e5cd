import { counted } from '#shared/count-words.ts';
import { columnLetter } from '#shared/sheets/sheet.ts';
import type { LabImportView } from '#shared/views/lab-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { kindOf, kinds, type Kind, type Row } from './row-kinds.ts';

export function Strip({ rows }: { rows: readonly Row[] }) {
  const count = (kind: Kind) => rows.filter((row) => kindOf(row) === kind).length;
  const shown = (Object.keys(kinds) as Kind[]).filter((kind) => count(kind) > 0);
  return (
    <div className="sheet pad">
      {rows.length <= 400 && (
        <div aria-hidden className="flex flex-wrap gap-[3px] mb-3">
          {rows.map((row) => {
            const { fill, stroke, mark } = kinds[kindOf(row)];
            return (
              <span
                key={row.sheet + row.cell}
                className="w-[14px] h-[22px] text-xs leading-5 text-center font-semibold text-ink border"
                style={{ background: fill, borderColor: stroke }}
              >
                {mark}
              </span>
            );
          })}
        </div>
      )}
      <ul className="flex flex-wrap gap-x-6 gap-y-1 list-none">
        {shown.map((kind) => (
          <li key={kind} className="flex items-center gap-2">
            <span
              aria-hidden
              className="w-[14px] h-[18px] text-xs text-center leading-4 border"
              style={{ background: kinds[kind].fill, borderColor: kinds[kind].stroke }}
            >
              {kinds[kind].mark}
            </span>
            <span>
              <strong>{count(kind)}</strong> {kinds[kind].words}
            </span>
          </li>
        ))}
      </ul>
    </div>
  );
}

const shapeWords: Record<LabImportView['reading']['shape'], string> = {
  'long-list': 'a long list, one result a row',
  crosstab: 'parameters against sampling dates',
  'samples-down': 'one sample a row, parameters across',
};

export function Preview({ view }: { view: LabImportView }) {
  const { reading } = view;
  const columnCount = Math.max(...reading.preview.map((row) => row.cells.length), 1);
  return (
    <>
      <ScrollBox label="The sheet as it looks">
        <table className="tbl tbl-tight">
          <caption className="sr-only">First rows of sheet {reading.sheetName}</caption>
          <thead>
            <tr>
              <th scope="col">
                <span className="sr-only">Row</span>
              </th>
              {Array.from({ length: columnCount }, (_, index) => (
                <th key={index} scope="col">
                  {columnLetter(index)}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {reading.preview.map((row) => (
              <tr key={row.number} className={row.number === reading.headerRow ? 'font-semibold' : ''}>
                <th scope="row" className="text-muted">
                  {row.number}
                </th>
                {Array.from({ length: columnCount }, (_, index) => (
                  <td key={index}>{row.cells[index] ?? ''}</td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
      <p className="hint mt-2">
        Sheet “{reading.sheetName}”, the first {reading.preview.length} rows. Header in row{' '}
        {reading.headerRow}. Read as {shapeWords[reading.shape]}
        {reading.jobNumber ? `; laboratory job ${reading.jobNumber}` : ''}.
      </p>
    </>
  );
}

export function HowRead({ view }: { view: LabImportView }) {
  const { reading } = view;
  const noticed = view.rows.filter((row) => row.state === 'warned' && row.messages.length);
  return (
    <div className="grid gap-x-8 gap-y-4 lg:grid-cols-2 items-start">
      <div className="sheet pad">
        <ul className="list-disc pl-5 grid gap-1">
          {reading.notes.map((note) => (
            <li key={note}>{note}</li>
          ))}
          {reading.qualifierKey.map((one) => (
            <li key={one.letter}>
              The sheet says: {one.letter} = {one.words}
            </li>
          ))}
          {reading.dateOrder && (
            <li>
              Dates are read with the {reading.dateOrder === 'day-first' ? 'day' : 'month'} first, your
              answer.
            </li>
          )}
          {reading.equalToLimit && (
            <li>
              Values that equal their limit are read as{' '}
              {reading.equalToLimit === 'below' ? 'below it' : 'measured'}, your answer.
            </li>
          )}
          {reading.skipped.length > 0 && (
            <li>
              {counted(reading.skipped.length, 'row is not a result', 'rows are not results')}:{' '}
              {reading.skipped
                .slice(0, 4)
                .map((row) => `row ${row.rowNumber} “${row.text.slice(0, 40)}” (${row.why})`)
                .join('; ')}
              {reading.skipped.length > 4 ? ' …' : ''}
            </li>
          )}
          <li>
            SHA-256 of the file: <span className="break-all">{view.fileSha256}</span>
          </li>
        </ul>
      </div>
      {noticed.length > 0 && (
        <ScrollBox label="Read differently from how it looks">
          <table className="tbl tbl-tight">
            <caption className="sr-only">Cells read differently from how they look</caption>
            <thead>
              <tr>
                <th scope="col">Cell</th>
                <th scope="col">In the sheet</th>
                <th scope="col">Read as, and why</th>
              </tr>
            </thead>
            <tbody>
              {noticed.slice(0, 30).map((row) => (
                <tr key={row.sheet + row.cell}>
                  <th scope="row">{row.cell}</th>
                  <td>
                    {row.resultText} {row.unitText}
                  </td>
                  <td>{row.messages.join(' ')}</td>
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollBox>
      )}
    </div>
  );
}
