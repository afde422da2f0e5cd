import { useQueryClient } from '@tanstack/react-query';
import { useNavigate, useSearchParams } from 'react-router';
import { accessLinkInput } from '#shared/schemas/access.ts';
import { RecordForm, TextField } from '../../components/form.tsx';
import { PageHead } from '../../components/page.tsx';
import { api } from '../../lib/api-client.ts';

/** Chooses a password by a link from an e-mail. */
export function PasswordPage() {
  const [search] = useSearchParams();
  const navigate = useNavigate();
  const client = useQueryClient();
  const secret = search.get('secret') ?? '';
  return (
    <main className="max-w-[760px] mx-auto px-4 py-12">
      <PageHead
        title="Choose a password"
        sentence="The link works once. After this you are signed in, and older sessions are ended."
      />
      <RecordForm<{ secret: string; password: string }>
        schema={accessLinkInput}
        defaults={{ secret, password: '' }}
        submitLabel="Save and sign in"
        onSubmit={(values) => api.send('POST', '/passwords', values)}
        onDone={() => {
          client.clear();
          void navigate('/');
        }}
      >
        <TextField
          name="password"
          label="New password"
          hint="At least 12 characters. A few words in a row are easy to remember."
          type="password"
          autoComplete="new-password"
        />
      </RecordForm>
    </main>
  );
}
