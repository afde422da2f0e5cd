import { dayName } from '#shared/calendar/day.ts';
import { siteSettingsInput } from '#shared/schemas/sites.ts';
import { usePlace } from '../../app/place.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { Section } from '../../components/page.tsx';
import { useWrite } from '../../lib/record.ts';
import { FormLink, SiteFactFields, type SectionProps } from './site-parts.tsx';

interface SiteSettings {
  name: string;
  latitudeDeg: string;
  elevationM: string;
  openedOn: string;
  displayUnits: 'metric' | 'us';
  reportDueDays: string;
  certificationText: string;
}

function SettingsForm({ view, onDone }: SectionProps & { onDone: () => void }) {
  const { site } = usePlace();
  const save = useWrite<SiteSettings>(site.id, '', {
    method: 'PUT',
    headers: { 'if-match': view.settingsTag },
  });
  const { name, latitudeDeg, elevationM, openedOn, displayUnits, reportDueDays, certificationText } =
    view.site;
  return (
    <RecordForm<SiteSettings>
      schema={siteSettingsInput}
      defaults={{
        name,
        latitudeDeg,
        elevationM,
        openedOn,
        displayUnits,
        reportDueDays: String(reportDueDays),
        certificationText: certificationText ?? '',
      }}
      submitLabel="Save the settings"
      onSubmit={(values) => save.mutateAsync(values)}
      onDone={onDone}
    >
      <SiteFactFields />
      <TextField
        name="reportDueDays"
        label="Days from the end of the quarter to the report"
        unit="days"
        inputMode="numeric"
      />
      <TextField
        name="certificationText"
        label="Words of the certification"
        hint="The permit’s own text, word for word. Nothing is worded by the program."
        isOptional
        isLong
      />
    </RecordForm>
  );
}

/** Settings of the site; two people changing them at once is noticed. */
export function SettingsSection({ view }: SectionProps) {
  const { can } = usePlace();
  const { site } = view;
  const rule = view.dayRules.at(-1);
  return (
    <Section
      title="Settings"
      id="settings"
      aside={
        can('change:site') && (
          <FormLink label="Change the settings">
            {(onDone) => <SettingsForm view={view} onDone={onDone} />}
          </FormLink>
        )
      }
    >
      <dl className="sheet pad grid gap-x-6 gap-y-1 sm:grid-cols-[minmax(130px,220px)_1fr]">
        <dt className="text-muted">Latitude</dt>
        <dd>{site.latitudeDeg}°</dd>
        <dt className="text-muted">Height</dt>
        <dd>{site.elevationM} m above the sea</dd>
        <dt className="text-muted">Record begins</dt>
        <dd>{dayName(site.openedOn)}</dd>
        <dt className="text-muted">Site day</dt>
        <dd>
          {rule && `begins at ${rule.dayBoundary}, ${rule.timeZone}, since ${dayName(rule.validFromOn)}`}
        </dd>
        <dt className="text-muted">Units shown</dt>
        <dd>{site.displayUnits === 'us' ? 'US' : 'metric'}</dd>
        <dt className="text-muted">Report due</dt>
        <dd>{site.reportDueDays} days after the quarter</dd>
        <dt className="text-muted">Certification</dt>
        <dd>{site.certificationText ? `“${site.certificationText}”` : 'not entered yet'}</dd>
      </dl>
    </Section>
  );
}
