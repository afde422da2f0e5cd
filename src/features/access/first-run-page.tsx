import { useNavigate } from 'react-router';
import { firstRunInput } from '#shared/schemas/access.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { PageHead } from '../../components/page.tsx';
import { api } from '../../lib/api-client.ts';

/** The first organisation of an empty installation, with its administrator. */
export function FirstRunPage() {
  const navigate = useNavigate();
  return (
    <main className="max-w-[760px] mx-auto px-4 py-12">
      <PageHead
        title="Start the record"
        sentence="This installation is empty. Name the organisation and its first administrator; sites, cells and people follow."
      />
      <RecordForm
        schema={firstRunInput}
        defaults={{ organisationName: '', displayName: '', email: '', password: '' }}
        submitLabel="Start"
        onSubmit={(values) => api.send('POST', '/first-run', values)}
        onDone={() => void navigate('/')}
      >
        <TextField name="organisationName" label="Organisation" />
        <TextField name="displayName" label="Your name" autoComplete="name" />
        <TextField name="email" label="E-mail address" inputMode="email" autoComplete="username" />
        <TextField
          name="password"
          label="Password"
          type="password"
          hint="At least 12 characters."
          autoComplete="new-password"
        />
      </RecordForm>
    </main>
  );
}
