import { Link, useNavigate } from 'react-router';
import { useState } from 'react';
import { dayName } from '#shared/calendar/day.ts';
import { monthName } from '#shared/calendar/month.ts';
import { gapChoiceInput } from '#shared/schemas/climate.ts';
import type { ClimateView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { FileUpload } from '../../components/file-upload.tsx';
import { ChoiceField, RecordForm, TextField } from '../../components/form.tsx';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Empty, Viewed } from '../../components/state.tsx';
import { UploadState } from '../../components/upload-state.tsx';
import { Word } from '../../components/words.tsx';
import { formatMm, formatNumber } from '../../lib/format-quantity.ts';
import { newId } from '../../lib/new-id.ts';
import { useRecord, useWrite } from '../../lib/record.ts';
import { FormLink, optionsOf, type SectionProps } from './site-parts.tsx';

const choiceNames = {
  'leave-out': 'leave the missing days out',
  'scale-by-days': 'scale by days',
  'other-station': 'fill from another station',
  'station-normal': 'fill from the station’s own normal',
} as const;

interface GapChoice {
  id: string;
  month: string;
  choice: string;
  otherStationId?: string;
  reason: string;
}

function GapForm({ view, month, onDone }: SectionProps & { month: string; onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<GapChoice>(site.id, '/climate-gap-choices');
  return (
    <RecordForm<GapChoice>
      schema={gapChoiceInput}
      defaults={{ id: newId(), month, reason: '' }}
      submitLabel="Save the choice"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <ChoiceField
        name="choice"
        label="What to do about the missing days"
        hint="Nothing is scaled or filled without a choice. It is stored and printed."
        options={Object.entries(choiceNames).map(([value, label]) => ({ value, label }))}
      />
      <ChoiceField
        name="otherStationId"
        label="Other station"
        options={optionsOf(view.stations)}
        isOptional
      />
      <TextField name="reason" label="Reason" isLong />
    </RecordForm>
  );
}

function Months({ view, climate }: SectionProps & { climate: ClimateView }) {
  const { can } = usePlace();
  const [isAll, setIsAll] = useState(false);
  const shown = isAll ? climate.months : climate.months.slice(-24);
  if (!climate.months.length)
    return <Empty>No climate yet. Upload a monthly or daily series, or enter rain on the round.</Empty>;
  const value = (number: number | null, decimals = 1) =>
    number === null ? <span className="text-muted">missing</span> : formatNumber(number, decimals);
  return (
    <>
      <ScrollBox label="Climate by month">
        <table className="tbl tbl-tight">
          <caption className="sr-only">Climate by month</caption>
          <thead>
            <tr>
              <th scope="col" className="sticky left-0 bg-surface">
                Month
              </th>
              <th scope="col" className="r">
                Rain, mm
              </th>
              <th scope="col" className="r">
                Rain days
              </th>
              <th scope="col" className="r">
                Mean, °C
              </th>
              <th scope="col" className="r">
                Min, °C
              </th>
              <th scope="col" className="r">
                Max, °C
              </th>
              <th scope="col" className="r">
                Temperature days
              </th>
              <th scope="col">State</th>
            </tr>
          </thead>
          <tbody>
            {[...shown].reverse().map((row) => (
              <tr key={row.month}>
                <th scope="row" className="sticky left-0 bg-surface whitespace-nowrap">
                  {monthName(row.month)}
                </th>
                <td className="r">{row.rainDayCount ? formatMm(row.precipitationMm) : value(null)}</td>
                <td className="r">
                  {row.rainDayCount} of {row.dayCount}
                </td>
                <td className="r">{value(row.tMeanC)}</td>
                <td className="r">{value(row.tMinC)}</td>
                <td className="r">{value(row.tMaxC)}</td>
                <td className="r">
                  {row.temperatureDayCount} of {row.dayCount}
                </td>
                <td>
                  {row.isComplete ? (
                    <Word look="good">Complete</Word>
                  ) : (
                    <>
                      <Word look={row.choice ? 'note' : 'ask'}>{row.choice ? 'Choice' : 'Days missing'}</Word>
                      {row.choice && (
                        <span className="hint block">
                          {choiceNames[row.choice as keyof typeof choiceNames]}
                        </span>
                      )}
                      {can('change:parameters') && (
                        <span className="block">
                          <FormLink
                            label={row.choice ? 'Choose again' : 'Choose'}
                            title={`Missing days, ${monthName(row.month)}`}
                          >
                            {(onDone) => <GapForm view={view} month={row.month} onDone={onDone} />}
                          </FormLink>
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
      {climate.months.length > 24 && (
        <p className="mt-2 no-print">
          <button type="button" className="link" onClick={() => setIsAll(!isAll)}>
            {isAll ? 'Show the last two years' : `Show all ${climate.months.length} months`}
          </button>
        </p>
      )}
    </>
  );
}

/** Climate series: months with what is missing, uploads, and the choice for each gap. */
export function ClimateSection({ view }: SectionProps) {
  const { site, can } = usePlace();
  const query = useRecord<ClimateView>(site.id, '/climate');
  const navigate = useNavigate();
  const [stationName, setStationName] = useState('');
  return (
    <Section
      title="Climate"
      id="climate"
      aside={`Stations: ${view.stations.map((station) => station.name).join(', ')}`}
    >
      <Viewed query={query}>
        {(climate) => (
          <div className="grid gap-6">
            <Months view={view} climate={climate} />
            {can('import:climate') && (
              <div className="sheet pad grid gap-4 max-w-[760px]">
                <h3 className="font-semibold">Upload a series</h3>
                <div>
                  <label className="label" htmlFor="station-name">
                    Name of the station
                  </label>
                  <input
                    id="station-name"
                    className="input"
                    value={stationName}
                    onChange={(event) => setStationName(event.target.value)}
                  />
                </div>
                <FileUpload
                  siteId={site.id}
                  path="/climate-imports"
                  label="Climate file"
                  hint="An .xlsx or .csv, daily (a date column) or monthly (year and month), with precipitation and temperatures. Columns and units can be corrected on the next page."
                  fields={() =>
                    stationName.trim()
                      ? { values: { stationName } }
                      : { missing: 'Enter the name of the station first.' }
                  }
                  onDone={({ id }) => void navigate(`/sites/${site.slug}/site/climate/${id}`)}
                />
              </div>
            )}
            {climate.uploads.length > 0 && (
              <ul className="sheet lines px-4 list-none">
                {climate.uploads.map((upload) => (
                  <li key={upload.id} className="flex flex-wrap gap-x-4 items-baseline">
                    <Link
                      className="font-medium break-all"
                      to={`/sites/${site.slug}/site/climate/${upload.id}`}
                    >
                      {upload.fileName}
                    </Link>
                    <span className="hint">
                      {dayName(upload.uploadedAt.slice(0, 10))}, {upload.counts.read} rows
                    </span>
                    <span className="ml-auto">
                      <UploadState upload={upload} />
                    </span>
                  </li>
                ))}
              </ul>
            )}
          </div>
        )}
      </Viewed>
    </Section>
  );
}
