import { useQueryClient } from '@tanstack/react-query';
import { Link, useNavigate } from 'react-router';
import { siteInput, type SiteInput } from '#shared/schemas/sites.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { PageHead } from '../../components/page.tsx';
import { api } from '../../lib/api-client.ts';
import { newId } from '../../lib/new-id.ts';
import { SiteFactFields } from './site-parts.tsx';

/** A new site: name, place, and how its day runs. Cells follow on its own page. */
export function NewSitePage() {
  const navigate = useNavigate();
  const client = useQueryClient();
  const create = async (values: SiteInput) => {
    const { slug } = await api.send<{ slug: string }>('POST', '/sites', values);
    await client.invalidateQueries({ queryKey: ['me'] });
    await navigate(`/sites/${slug}/site`);
  };
  const defaults: SiteInput = {
    id: newId(),
    name: '',
    latitudeDeg: '',
    elevationM: '',
    timeZone: Intl.DateTimeFormat().resolvedOptions().timeZone,
    dayBoundary: '00:00',
    openedOn: '',
    displayUnits: 'metric',
  };
  return (
    <main className="max-w-[760px] mx-auto px-4 py-10">
      <PageHead
        title="Make a new site"
        sentence="Cells, meters and people are added on the site’s own page."
        crumb={<Link to="/">Your sites</Link>}
      />
      <RecordForm<SiteInput>
        schema={siteInput}
        defaults={defaults}
        submitLabel="Make the site"
        onSubmit={create}
      >
        <SiteFactFields />
        <TextField
          name="timeZone"
          label="Time zone"
          hint="The IANA name, like Europe/London or America/Chicago."
        />
        <TextField
          name="dayBoundary"
          label="Time the site day begins"
          hint="Like 00:00 or 08:00: the hour of the morning round. A day runs from it to the same time on the next."
        />
      </RecordForm>
    </main>
  );
}
