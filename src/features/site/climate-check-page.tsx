import { useState } from 'react';
import { Link, useParams } from 'react-router';
import {
  climateFieldNames,
  climateFields,
  climateUnitNames,
  climateUnitsOf,
  type ClimateField,
  type ClimateMapping,
  type ClimateUnit,
} from '#shared/climate/read-climate-sheet.ts';
import { columnLetter } from '#shared/sheets/sheet.ts';
import type { ClimateImportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, ScrollBox, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { useRecord, useWrite } from '../../lib/record.ts';

function Mapping({ view, isOpen }: { view: ClimateImportView; isOpen: boolean }) {
  const { site } = usePlace();
  const [mapping, setMapping] = useState<ClimateMapping>(view.mapping);
  const save = useWrite<ClimateMapping>(site.id, `/climate-imports/${view.id}/mapping`);
  const columnOf = (field: ClimateField) => mapping.columns.find((one) => one.field === field);
  const put = (field: ClimateField, column: number | null, unit: ClimateUnit) =>
    setMapping((before) => ({
      ...before,
      columns: [
        ...before.columns.filter((one) => one.field !== field),
        ...(column === null ? [] : [{ field, column, unit }]),
      ],
    }));
  const headerOptions = view.headers.map((header, index) => (
    <option key={index} value={index}>
      {columnLetter(index)}: {header || 'no heading'}
    </option>
  ));
  const when =
    mapping.kind === 'daily'
      ? `a date in column ${columnLetter(mapping.dateColumn ?? 0)}`
      : `year and month in columns ${columnLetter(mapping.yearColumn ?? 0)} and ${columnLetter(mapping.monthColumn ?? 1)}`;
  return (
    <div className="sheet pad grid gap-4">
      <p>
        Sheet “{mapping.sheetName}”, header in row {mapping.headerRow}; {mapping.kind} values by {when}.
      </p>
      <div className="grid gap-3 sm:grid-cols-2 lg:grid-cols-3">
        {climateFields.map((field) => {
          const column = columnOf(field);
          const units = climateUnitsOf[field];
          return (
            <fieldset key={field} className="box grid gap-2" disabled={!isOpen}>
              <legend className="font-semibold px-1">{climateFieldNames[field]}</legend>
              <label className="hint" htmlFor={`column-${field}`}>
                Column
              </label>
              <select
                id={`column-${field}`}
                className="input"
                value={column?.column ?? ''}
                onChange={(event) =>
                  put(
                    field,
                    event.target.value === '' ? null : Number(event.target.value),
                    column?.unit ?? units[0]!,
                  )
                }
              >
                <option value="">not in the file</option>
                {headerOptions}
              </select>
              <label className="hint" htmlFor={`unit-${field}`}>
                Unit
              </label>
              <select
                id={`unit-${field}`}
                className="input"
                value={column?.unit ?? units[0]}
                onChange={(event) => column && put(field, column.column, event.target.value as ClimateUnit)}
              >
                {units.map((unit) => (
                  <option key={unit} value={unit}>
                    {climateUnitNames[unit]}
                  </option>
                ))}
              </select>
            </fieldset>
          );
        })}
      </div>
      {save.error && (
        <p role="alert" className="error-text">
          ⚠ {save.error.document.detail}
        </p>
      )}
      {isOpen && (
        <p>
          <button
            type="button"
            className="btn btn-second"
            disabled={save.isPending}
            onClick={() => save.mutate(mapping)}
          >
            Read it again like this
          </button>
        </p>
      )}
    </div>
  );
}

function Rows({ rows, fields }: { rows: ClimateImportView['rows']; fields: ClimateField[] }) {
  return (
    <ScrollBox label="Rows as they are read">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Rows as they are read</caption>
        <thead>
          <tr>
            <th scope="col">Row</th>
            <th scope="col">Day or month</th>
            {fields.map((field) => (
              <th key={field} scope="col" className="r">
                {climateFieldNames[field]}, {climateUnitNames[climateUnitsOf[field][0]!]}
              </th>
            ))}
            <th scope="col">Noticed</th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.rowNumber} className={row.state === 'held' ? 'bg-warn-bg' : ''}>
              <th scope="row">{row.rowNumber}</th>
              <td>{row.when || 'not read'}</td>
              {fields.map((field) => (
                <td key={field} className="r">
                  {row.values[field] ?? <span className="text-muted">missing</span>}
                </td>
              ))}
              <td>{row.messages.join(' ')}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function Act({ view }: { view: ClimateImportView }) {
  const { site, can } = usePlace();
  const confirm = useWrite<Record<string, never>, { writtenCount: number }>(
    site.id,
    `/climate-imports/${view.id}/confirmation`,
  );
  const undo = useWrite<Record<string, never>>(site.id, `/climate-imports/${view.id}/undo`);
  if (!can('import:climate')) return null;
  const error = confirm.error ?? undo.error;
  return (
    <div className="grid gap-3 mt-6 no-print" role="status">
      {confirm.data && <p className="box box-done">{confirm.data.writtenCount} rows were written.</p>}
      {error && (
        <p role="alert" className="error-text">
          ⚠ {error.document.detail}
        </p>
      )}
      {view.undoneAt ? (
        <p>This upload was undone. The file is kept.</p>
      ) : view.confirmedAt ? (
        <p>
          <button
            type="button"
            className="btn btn-second"
            disabled={undo.isPending}
            onClick={() => undo.mutate({})}
          >
            Undo this import
          </button>{' '}
          <span className="hint">Every row it wrote is voided, not erased.</span>
        </p>
      ) : (
        <p className="flex flex-wrap gap-3">
          <button
            type="button"
            className={view.doubts.length ? 'btn btn-second' : 'btn'}
            disabled={confirm.isPending}
            onClick={() => confirm.mutate({})}
          >
            Write {view.counts.ok + view.counts.warned} {view.mapping.kind === 'daily' ? 'days' : 'months'}
            {view.doubts.length > 0 && ' all the same'}
          </button>
          <Link className="btn btn-second" to={`/sites/${site.slug}/site#climate`}>
            Leave without writing
          </Link>
        </p>
      )}
    </div>
  );
}

/** A climate file: how it is read, correctable, and what will be written. */
export function ClimateCheckPage() {
  const { importId = '' } = useParams();
  const { site } = usePlace();
  const query = useRecord<ClimateImportView>(site.id, `/climate-imports/${importId}`);
  const view = query.data;
  return (
    <>
      <PageHead
        title={view?.confirmedAt ? 'Climate upload' : 'Check the climate before it is written'}
        crumb={
          view && (
            <span className="break-all">
              {view.fileName} · <Link to={`/sites/${site.slug}/site#climate`}>Climate of the site</Link>
            </span>
          )
        }
        sentence={
          view &&
          `${view.rowCount} rows; ${view.counts.held} held, ${view.counts.warned} with something missing. ${view.undoneAt ? 'Undone.' : view.confirmedAt ? 'Written.' : 'Nothing is stored yet.'}`
        }
      />
      <Viewed query={query}>
        {(data) => {
          const fields = climateFields.filter((field) =>
            data.mapping.columns.some((one) => one.field === field),
          );
          return (
            <>
              <Section title="How it is read">
                {data.notes.length > 0 && (
                  <ul className="list-disc pl-5 mb-3">
                    {data.notes.map((note) => (
                      <li key={note}>{note}</li>
                    ))}
                  </ul>
                )}
                {data.doubts.length > 0 && (
                  <div className="box box-warn mb-3">
                    <p className="font-semibold">Look at this before it is written</p>
                    <ul className="list-disc pl-5">
                      {data.doubts.map((doubt) => (
                        <li key={doubt}>{doubt}</li>
                      ))}
                    </ul>
                  </div>
                )}
                <Mapping key={JSON.stringify(data.mapping)} view={data} isOpen={!data.confirmedAt} />
              </Section>
              <Act view={data} />
              {data.problems.length > 0 && (
                <Section title="Held, or with something to notice" aside={`${data.problems.length} rows`}>
                  <Rows rows={data.problems.slice(0, 100)} fields={fields} />
                </Section>
              )}
              <Section
                title="What will be written"
                aside={
                  data.rowCount > data.rows.length
                    ? `the first ${data.rows.length} of ${data.rowCount} rows; all were read`
                    : `${data.rowCount} rows`
                }
              >
                <Rows rows={data.rows} fields={fields} />
              </Section>
            </>
          );
        }}
      </Viewed>
    </>
  );
}
