import { useEffect } from 'react';
import { useLocation } from 'react-router';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { PageHead } from '../../components/page.tsx';
import { Viewed } from '../../components/state.tsx';
import { formatHa } from '../../lib/format-quantity.ts';
import { useRecord } from '../../lib/record.ts';
import { CellsSection } from './cells-section.tsx';
import { ClimateSection } from './climate-section.tsx';
import { CoversSection } from './covers-section.tsx';
import { MeteringSection } from './metering-section.tsx';
import { PeopleSection } from './people-section.tsx';
import { SettingsSection } from './settings-section.tsx';

const parts = [
  ['cells', 'Cells'],
  ['covers', 'Cover types'],
  ['sumps', 'Sumps'],
  ['meters', 'Meters'],
  ['stores', 'Stores'],
  ['order', 'Walking order'],
  ['climate', 'Climate'],
  ['settings', 'Settings'],
] as const;

function stateSentence(view: SiteStructureView): string {
  const area = view.cells.reduce(
    (sum, cell) =>
      sum + Number(view.cellAreas.filter((one) => one.cellId === cell.id).at(-1)?.linedAreaM2 ?? 0),
    0,
  );
  const templates = view.coverTypes.filter(
    (type) =>
      !type.confirmedAt &&
      view.coverPeriods.some((period) => period.coverTypeId === type.id && period.toOn === null),
  ).length;
  return `${view.cells.length} ${view.cells.length === 1 ? 'cell' : 'cells'}, ${formatHa(area)} ha lined, ${view.meters.length} meters.${templates ? ` ${templates} cover types in use are still templates.` : ''}`;
}

/** What the site is made of, and the forms to add to it. */
export function SitePage() {
  const { site, can } = usePlace();
  const query = useRecord<SiteStructureView>(site.id, '');
  const { hash } = useLocation();
  const isLoaded = query.isSuccess;
  useEffect(() => {
    if (isLoaded && hash) document.getElementById(hash.slice(1))?.scrollIntoView();
  }, [isLoaded, hash]);
  const seen = can('read:people') ? [...parts, ['people', 'People'] as const] : parts;
  return (
    <>
      <PageHead title={`Site, ${site.name}`} sentence={query.data && stateSentence(query.data)} />
      <Viewed query={query}>
        {(view) => (
          <>
            <nav aria-label="On this page" className="flex flex-wrap gap-x-5 mb-6 no-print">
              {seen.map(([id, name]) => (
                <a key={id} href={`#${id}`} className="min-h-11 inline-flex items-center">
                  {name}
                </a>
              ))}
            </nav>
            <CellsSection view={view} />
            <CoversSection view={view} />
            <MeteringSection view={view} />
            <ClimateSection view={view} />
            <SettingsSection view={view} />
            {can('read:people') && <PeopleSection />}
          </>
        )}
      </Viewed>
    </>
  );
}
