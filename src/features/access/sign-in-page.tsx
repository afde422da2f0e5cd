import { useQuery, useQueryClient } from '@tanstack/react-query';
import { Link, Navigate, useNavigate, useSearchParams } from 'react-router';
import { passwordResetInput, signInInput, type SignInInput } from '#shared/schemas/access.ts';
import { roleNames, type Role } from '#shared/permissions.ts';
import type { EntranceView } from '#shared/views/site-view.ts';
import { useState } from 'react';
import { RecordForm, TextField } from '../../components/form.tsx';
import { Failed, Loading } from '../../components/state.tsx';
import { api } from '../../lib/api-client.ts';

const work: Record<Role, string> = {
  operator: 'today’s round, in walking order',
  supervisor: 'yesterday’s log, estimates and meter events',
  engineer: 'the balance, and why the young cell lies below it',
  lab: 'sheets of results, checked before they are written',
  manager: 'an exceedance with its clock, and the quarter to sign',
  auditor: 'issued reports and the trail, reads only',
  admin: 'people, roles and settings',
};

function Tubes() {
  const tubes = [
    ['climate', 1, 'var(--color-s-rain)', '31 of 31 days'],
    ['meters', 0.9, 'var(--color-s-pumped)', '28 of 31 days'],
    ['lab', 0.5, 'var(--color-s-effluent)', '1 of 2 sets'],
  ] as const;
  return (
    <figure className="hidden md:block mt-10">
      <svg
        width="380"
        height="270"
        viewBox="0 0 380 270"
        role="img"
        aria-label="Three glasses filled to the share of records that arrived: climate full, meters nearly, lab half"
      >
        {tubes.map(([name, filled, colour, text], index) => (
          <g key={name} transform={`translate(${index * 136} 0)`}>
            <rect x="0.5" y="0.5" width="104" height="220" fill="#fff" stroke="var(--color-edge)" />
            <rect x="1" y={221 - 220 * filled} width="103" height={220 * filled} fill={colour} />
            <text y="244" fontSize="16" fontWeight="600" fill="var(--color-ink)">
              {name}
            </text>
            <text y="264" fontSize="14" fill="var(--color-muted)">
              {text}
            </text>
          </g>
        ))}
      </svg>
    </figure>
  );
}

function PasswordSignIn({ onIn }: { onIn: () => void }) {
  const [isReset, setIsReset] = useState(false);
  const [sent, setSent] = useState<string | null>(null);
  if (isReset) {
    return (
      <div className="grid gap-4">
        {sent && (
          <p role="status" className="box box-done">
            {sent}
          </p>
        )}
        <RecordForm<{ email: string }>
          schema={passwordResetInput}
          defaults={{ email: '' }}
          submitLabel="Send the link"
          onSubmit={async (values) =>
            setSent((await api.send<{ sentence: string }>('POST', '/password-resets', values)).sentence)
          }
        >
          <TextField name="email" label="E-mail address" inputMode="email" autoComplete="username" />
        </RecordForm>
        <p>
          <button type="button" className="link" onClick={() => setIsReset(false)}>
            Back to signing in
          </button>
        </p>
      </div>
    );
  }
  return (
    <div className="grid gap-4">
      <RecordForm<SignInInput>
        schema={signInInput}
        defaults={{ email: '', password: '' }}
        submitLabel="Sign in"
        onSubmit={(values) => api.send('POST', '/sign-in', values)}
        onDone={onIn}
      >
        <TextField name="email" label="E-mail address" inputMode="email" autoComplete="username" />
        <TextField name="password" label="Password" type="password" autoComplete="current-password" />
      </RecordForm>
      <p>
        <button type="button" className="link" onClick={() => setIsReset(true)}>
          I do not know my password
        </button>
      </p>
    </div>
  );
}

export function SignInPage() {
  const client = useQueryClient();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const entrance = useQuery({
    queryKey: ['entrance'],
    queryFn: ({ signal }) => api.get<EntranceView>('/entrance', signal),
  });
  const next = search.get('next');
  const handleIn = async () => {
    client.removeQueries({ queryKey: ['me'] });
    client.removeQueries({ queryKey: ['site'] });
    await navigate(next?.startsWith('/') && !next.startsWith('//') ? next : '/');
  };
  const handleDemo = async (email: string) => {
    await api.send('POST', '/demo-sign-in', { email });
    await handleIn();
  };
  if (entrance.data?.isEmpty) return <Navigate to="/first-run" replace />;
  const order = Object.keys(work);
  return (
    <main className="max-w-[1080px] mx-auto px-4 md:px-8 py-10 md:py-16 grid gap-10 md:grid-cols-2">
      <title>Sign in – Tallyweir</title>
      <div>
        <h1>Tallyweir</h1>
        <p className="text-lg mt-2 max-w-[24ch]">
          Every cubic metre of leachate, from rain to outfall, month by month.
        </p>
        <Tubes />
      </div>
      <div className="grid gap-8 content-start">
        {entrance.isPending && <Loading />}
        {entrance.isError && <Failed error={entrance.error} onRetry={() => void entrance.refetch()} />}
        {entrance.data && entrance.data.demoPeople.length > 0 && (
          <section aria-labelledby="demo-heading">
            <h2 id="demo-heading">Come in as</h2>
            <p className="hint mb-3">
              No password in the demo. Each person sees their own work. All of them are invented.
            </p>
            <ul className="sheet list-none">
              {[...entrance.data.demoPeople]
                .sort((a, b) => order.indexOf(a.role) - order.indexOf(b.role))
                .map((person) => (
                  <li
                    key={person.email}
                    className="flex items-center gap-4 px-4 py-3 border-b border-line last:border-0"
                  >
                    <p className="min-w-0">
                      <span className="font-semibold">{person.displayName}</span>,{' '}
                      {roleNames[person.role as Role]}
                      <span className="hint block">{work[person.role as Role]}</span>
                    </p>
                    <button
                      type="button"
                      className="link ml-auto min-h-12 whitespace-nowrap"
                      aria-label={`Come in as ${person.displayName}`}
                      onClick={() => void handleDemo(person.email)}
                    >
                      Come in
                    </button>
                  </li>
                ))}
            </ul>
            <p className="hint mt-2">
              This list exists only in the demo. Nothing entered here reaches an authority.
            </p>
          </section>
        )}
        {entrance.data && (
          <section aria-labelledby="sign-in-heading">
            <h2 id="sign-in-heading" className="mb-3">
              Sign in
            </h2>
            <PasswordSignIn onIn={() => void handleIn()} />
            {entrance.data.hasMailCatcher && (
              <p className="hint mt-3">
                No mail leaves this computer: <Link to="/caught-mail">see the mail that was caught</Link>.
              </p>
            )}
          </section>
        )}
      </div>
    </main>
  );
}
