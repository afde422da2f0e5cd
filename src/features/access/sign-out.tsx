import { useQueryClient } from '@tanstack/react-query';
import { useNavigate } from 'react-router';
import { countWaiting } from '../../lib/outbox.ts';
import { api } from '../../lib/api-client.ts';

/** Ends the session. Entries that wait on this device are counted first: they stay sealed here. */
export function SignOut() {
  const client = useQueryClient();
  const navigate = useNavigate();
  const handleSignOut = async () => {
    const waiting = await countWaiting();
    if (
      waiting > 0 &&
      !window.confirm(
        `${waiting} ${waiting === 1 ? 'entry waits' : 'entries wait'} on this phone and were not sent. They stay here until you sign in again. Sign out?`,
      )
    )
      return;
    await api.send('POST', '/sign-out', {});
    client.clear();
    await navigate('/sign-in');
  };
  return (
    <button type="button" className="link text-sm" onClick={() => void handleSignOut()}>
      Sign out
    </button>
  );
}
