import { useState } from 'react';
import { Link, useNavigate, useParams, useSearchParams } from 'react-router';
import { monthName } from '#shared/calendar/month.ts';
import type { LabView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { FileUpload } from '../../components/file-upload.tsx';
import { PageHead, ScrollBox, Section, TwoColumns } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { UploadState } from '../../components/upload-state.tsx';
import { Word } from '../../components/words.tsx';
import { formatInstant } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { LabSetup } from './lab-setup.tsx';
import { ResultPicture, ResultTable } from './result-lines.tsx';

function Upload({ view, checkPath }: { view: LabView; checkPath: string }) {
  const { site } = usePlace();
  const navigate = useNavigate();
  const [laboratoryId, setLaboratoryId] = useState(
    view.laboratories.length === 1 ? view.laboratories[0]!.id : '',
  );
  if (!view.laboratories.length)
    return <Empty>No laboratory is set up yet. An engineer adds it below.</Empty>;
  return (
    <div className="sheet pad grid gap-4">
      {view.laboratories.length > 1 && (
        <div>
          <label className="label" htmlFor="laboratory">
            Laboratory
          </label>
          <select
            id="laboratory"
            className="input"
            value={laboratoryId}
            onChange={(event) => setLaboratoryId(event.target.value)}
          >
            <option value="">Choose …</option>
            {view.laboratories.map((one) => (
              <option key={one.id} value={one.id}>
                {one.name}
              </option>
            ))}
          </select>
        </div>
      )}
      <FileUpload
        siteId={site.id}
        path="/lab-imports"
        label="Sheet of results"
        hint="An .xlsx or .csv as the laboratory sent it: a long list, or parameters against sampling dates. Nothing is stored until you have looked at it."
        fields={() =>
          laboratoryId ? { values: { laboratoryId } } : { missing: 'Choose the laboratory first.' }
        }
        onDone={({ id }) => void navigate(`${checkPath}/${id}`)}
      />
    </div>
  );
}

function Plan({ view }: { view: LabView }) {
  if (!view.plan.length) return <Empty>No sampling plan is set for this month.</Empty>;
  return (
    <ScrollBox label="Sampling plan of the month">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Samples planned and received in the month</caption>
        <thead>
          <tr>
            <th scope="col">Point</th>
            <th scope="col">Parameter</th>
            <th scope="col" className="r">
              Received
            </th>
            <th scope="col">State</th>
          </tr>
        </thead>
        <tbody>
          {view.plan.map((item) => (
            <tr key={item.id}>
              <th scope="row">{item.pointCode}</th>
              <td>{item.analyteName}</td>
              <td className="r">
                {item.receivedCount} of {item.expectedCount}
              </td>
              <td>
                {item.receivedCount >= item.expectedCount ? (
                  <Word look="good">In</Word>
                ) : (
                  <Word look="ask">Waiting</Word>
                )}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

function Results({ view, checkPath }: { view: LabView; checkPath: string }) {
  const [search, setSearch] = useSearchParams();
  const pointId = search.get('point') ?? '';
  const analyteId = search.get('parameter') ?? '';
  const choose = (name: string, value: string) =>
    setSearch((before) => {
      const next = new URLSearchParams(before);
      if (value) next.set(name, value);
      else next.delete(name);
      return next;
    });
  const shown = view.results
    .filter(
      (one) => (!pointId || one.samplePointId === pointId) && (!analyteId || one.analyteId === analyteId),
    )
    .sort((a, b) => (a.siteDay > b.siteDay ? -1 : 1));
  const [count, setCount] = useState(40);
  const used = view.analytes.filter((analyte) => view.results.some((one) => one.analyteId === analyte.id));
  return (
    <div className="grid gap-4">
      <div className="grid sm:grid-cols-2 gap-3 no-print">
        <div>
          <label className="label" htmlFor="point">
            Sample point
          </label>
          <select
            id="point"
            className="input"
            value={pointId}
            onChange={(event) => choose('point', event.target.value)}
          >
            <option value="">All points</option>
            {view.points.map((one) => (
              <option key={one.id} value={one.id}>
                {one.code} {one.name}
              </option>
            ))}
          </select>
        </div>
        <div>
          <label className="label" htmlFor="parameter">
            Parameter
          </label>
          <select
            id="parameter"
            className="input"
            value={analyteId}
            onChange={(event) => choose('parameter', event.target.value)}
          >
            <option value="">All parameters</option>
            {used.map((one) => (
              <option key={one.id} value={one.id}>
                {one.name}
              </option>
            ))}
          </select>
        </div>
      </div>
      {pointId && analyteId && <ResultPicture results={shown} />}
      <ResultTable results={shown.slice(0, count)} checkPath={checkPath} />
      {shown.length > count && (
        <p className="no-print">
          <button type="button" className="btn btn-second" onClick={() => setCount(count + 100)}>
            Show more of {shown.length} results
          </button>
        </p>
      )}
    </div>
  );
}

function stateSentence(view: LabView): string {
  const missing = view.plan.reduce(
    (sum, item) => sum + Math.max(0, item.expectedCount - item.receivedCount),
    0,
  );
  const waiting = view.uploads.filter((one) => !one.confirmedAt && !one.undoneAt).length;
  const held = view.uploads
    .filter((one) => one.confirmedAt && !one.undoneAt)
    .reduce((sum, one) => sum + one.counts.held, 0);
  return (
    [
      view.plan.length
        ? missing
          ? `${missing} of the planned results of the month are still to come.`
          : 'Every planned result of the month is in.'
        : '',
      waiting ? `${waiting} ${waiting === 1 ? 'upload is' : 'uploads are'} read and not written yet.` : '',
      held ? `${held} rows are held.` : '',
    ]
      .filter(Boolean)
      .join(' ') || 'Nothing is waiting.'
  );
}

/** Uploads of results, what the plan waits for, and results by point and parameter. */
export function LabPage() {
  const { month = '' } = useParams();
  const { site, can } = usePlace();
  const query = useRecord<LabView>(site.id, `/lab/${month}`);
  const checkPath = `/sites/${site.slug}/lab/${month}/check`;
  return (
    <>
      <PageHead title={`Lab, ${monthName(month)}`} sentence={query.data && stateSentence(query.data)} />
      <Viewed query={query}>
        {(view) => (
          <>
            <TwoColumns
              left={
                <>
                  {can('upload:results') && (
                    <Section title="Upload a sheet">
                      <Upload view={view} checkPath={checkPath} />
                    </Section>
                  )}
                  <Section title="Uploads">
                    {view.uploads.length === 0 ? (
                      <Empty>Nothing was uploaded yet.</Empty>
                    ) : (
                      <ul className="sheet lines px-4 list-none">
                        {view.uploads.slice(0, 12).map((upload) => (
                          <li key={upload.id} className="flex flex-wrap gap-x-4 gap-y-1 items-baseline">
                            <Link className="font-medium break-all" to={`${checkPath}/${upload.id}`}>
                              {upload.fileName}
                            </Link>
                            <span className="hint">
                              {formatInstant(upload.uploadedAt)}, {upload.by}, {upload.counts.read} rows
                            </span>
                            <span className="ml-auto">
                              <UploadState upload={upload} />
                            </span>
                          </li>
                        ))}
                      </ul>
                    )}
                  </Section>
                </>
              }
              right={
                <Section title="Planned this month">
                  <Plan view={view} />
                </Section>
              }
            />
            <Section title="Results" aside={`twelve months to ${monthName(month)}`}>
              <Results view={view} checkPath={checkPath} />
            </Section>
            {can('change:site') && <LabSetup view={view} />}
            <p className="hint mt-6">
              The laboratory’s signed report governs; what is here was read from its sheets.
            </p>
          </>
        )}
      </Viewed>
    </>
  );
}
