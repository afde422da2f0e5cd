import { useQuery } from '@tanstack/react-query';
import { useSearchParams } from 'react-router';
import { addMonths, monthName } from '#shared/calendar/month.ts';
import type { ForecastStartView, ForecastView } from '#shared/views/forecast-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, Section } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { recordQuery, useRecord, useWrite } from '../../lib/record.ts';
import { ForecastForm } from './forecast-form.tsx';
import { ForecastResult } from './forecast-result.tsx';

const pollMs = 500;

function Running({ view }: { view: ForecastView }) {
  const { site } = usePlace();
  const cancel = useWrite<Record<string, never>>(site.id, `/forecasts/${view.id}/cancellation`);
  return (
    <div className="sheet pad grid gap-3" role="status">
      <label htmlFor="forecast-progress">
        {view.doneCount} of {view.wantedCount} draws
      </label>
      <progress id="forecast-progress" className="w-full h-4" value={view.doneCount} max={view.wantedCount} />
      <p>
        <button type="button" className="btn btn-second" onClick={() => cancel.mutate({})}>
          Stop it
        </button>
      </p>
    </div>
  );
}

function Forecast({ id }: { id: string }) {
  const { site } = usePlace();
  const query = useQuery({
    ...recordQuery<ForecastView>(site.id, `/forecasts/${id}`),
    refetchInterval: ({ state }) => (state.data?.state === 'running' ? pollMs : false),
    staleTime: Infinity,
  });
  return (
    <Viewed query={query}>
      {(view) => (
        <>
          {view.state === 'running' && <Running view={view} />}
          {view.state === 'cancelled' && <p className="box">The forecast was stopped. Nothing was kept.</p>}
          {view.state === 'failed' && (
            <p className="box box-error" role="alert">
              The forecast stopped: {view.failure}
            </p>
          )}
          {view.state === 'done' && (
            <Section
              title={`${monthName(view.about.firstMonth)} to ${monthName(addMonths(view.about.firstMonth, view.about.monthCount - 1))}`}
              aside={`${view.about.memberCount} draws of climate and parameters, seed ${view.about.seed}; for planning only`}
            >
              <ForecastResult view={view} />
            </Section>
          )}
        </>
      )}
    </Viewed>
  );
}

/** Volume, storage and haul needs ahead, with their uncertainty, for plans side by side. */
export function AheadPage() {
  const { site, can } = usePlace();
  const [search, setSearch] = useSearchParams();
  const query = useRecord<ForecastStartView>(site.id, '/forecasts');
  const id = search.get('forecast');
  return (
    <>
      <PageHead
        title="Ahead"
        sentence={
          query.data &&
          `From ${monthName(query.data.firstMonth)}: leachate, store levels and loads to haul, with planned covers. For planning only; nothing here is kept in the record.`
        }
      />
      {id && <Forecast key={id} id={id} />}
      <Viewed query={query}>
        {(start) =>
          can('run:forecast') ? (
            <Section title={id ? 'Look again' : 'What to look at'}>
              <div className="no-print">
                <ForecastForm start={start} onStarted={(started) => setSearch({ forecast: started })} />
              </div>
            </Section>
          ) : (
            !id && (
              <p className="text-muted">An engineer, the plant supervisor or the site manager looks ahead.</p>
            )
          )
        }
      </Viewed>
    </>
  );
}
