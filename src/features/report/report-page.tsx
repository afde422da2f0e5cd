import { Link, useParams } from 'react-router';
import { quarterName } from '#shared/calendar/month.ts';
import type { ReportView } from '#shared/views/lab-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead, Section, TwoColumns } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { Word } from '../../components/words.tsx';
import { useRecord } from '../../lib/record.ts';
import { LeakTable, VerdictTable, VolumeTable } from './report-tables.tsx';
import { Changes, Issues, Signing } from './report-issues.tsx';
import { counts, stateSentence } from './report-words.ts';

const stateWords = { ready: ['good', 'Ready'], stops: ['bad', 'Stops'], ask: ['ask', 'Ask'] } as const;

function Readiness({ view }: { view: ReportView }) {
  const { site } = usePlace();
  const { stops } = counts(view);
  const own = view.issues.filter((one) => one.quarter === view.quarter).at(-1);
  const isCurrent = own !== undefined && !own.isStale;
  return (
    <Section
      title={
        stops
          ? `Can it be signed? Not yet: ${stops} ${stops === 1 ? 'thing stops' : 'things stop'} it`
          : isCurrent
            ? 'Signed; what was open then'
            : 'Can it be signed? Yes'
      }
    >
      <ul className="sheet lines px-4 list-none">
        {view.readiness.map((line) => (
          <li key={line.sentence} className="flex flex-wrap gap-x-4 gap-y-1 items-baseline">
            <span className="w-[80px]">
              <Word look={stateWords[line.state][0]}>{stateWords[line.state][1]}</Word>
            </span>
            <span className="flex-1 min-w-[220px]">{line.sentence}</span>
            {line.link && (
              <Link
                className="ml-auto"
                to={`/sites/${site.slug}/${line.link}`}
                aria-label={`Look at it: ${line.sentence}`}
              >
                Look at it
              </Link>
            )}
          </li>
        ))}
      </ul>
    </Section>
  );
}

/** Readiness of the quarter in words, its numbers, signing and issues. */
export function ReportPage() {
  const { quarter = '' } = useParams();
  const { site } = usePlace();
  const query = useRecord<ReportView>(site.id, `/reports/${quarter}`);
  return (
    <>
      <PageHead
        title={`Report, ${quarterName(quarter)}`}
        sentence={query.data && stateSentence(query.data)}
        crumb={
          query.data &&
          `Predicted by ${query.data.run.kind === 'frozen' ? `frozen run ${query.data.run.number}${query.data.run.isAccepted ? ', accepted' : ''}` : 'the working run'}.`
        }
      />
      <Viewed query={query}>
        {(view) => (
          <>
            <TwoColumns
              left={
                <>
                  <Readiness view={view} />
                  <Changes view={view} />
                </>
              }
              right={
                <>
                  <Signing view={view} />
                  <Issues view={view} />
                </>
              }
            />
            <Section title="Leachate" aside="m³; ◌ estimated, ⊕ allocated in part">
              <VolumeTable view={view} />
            </Section>
            {view.leakDetection.length > 0 && (
              <Section title="Leak detection">
                <LeakTable view={view} />
              </Section>
            )}
            <Section title="Effluent against limits">
              {view.verdicts.length ? (
                <VerdictTable view={view} />
              ) : (
                <p className="text-muted">No limit is in force in this quarter.</p>
              )}
              <p className="hint mt-2">
                A computed pass is not a compliance determination. The permit and the laboratory’s report
                govern.
              </p>
            </Section>
          </>
        )}
      </Viewed>
    </>
  );
}
