import { useQueryClient } from '@tanstack/react-query';
import { useEffect } from 'react';
import { meQuery } from '../../lib/record.ts';
import { dropFromOutbox, flushOutbox } from '../../lib/outbox.ts';
import { useOutbox } from './use-outbox.ts';

/** What is kept on this device and not sent yet; shown on every page while there is any. */
export function OutboxLine({ siteId }: { siteId: string }) {
  const client = useQueryClient();
  const items = useOutbox(siteId);
  const personId = client.getQueryData(meQuery.queryKey)?.personId ?? '';
  useEffect(() => {
    const send = () =>
      void flushOutbox(siteId, personId).then((count) => {
        if (count > 0) void client.invalidateQueries({ queryKey: ['site', siteId] });
      });
    send();
    window.addEventListener('online', send);
    window.addEventListener('focus', send);
    return () => {
      window.removeEventListener('online', send);
      window.removeEventListener('focus', send);
    };
  }, [siteId, personId, client]);
  if (!items.length) return null;
  const waiting = items.filter((item) => item.state === 'waiting');
  const asking = items.filter((item) => item.state === 'needs-answer');
  return (
    <div role="status" className="box box-warn mb-5 grid gap-2 no-print">
      {waiting.length > 0 && (
        <div className="flex flex-wrap items-center gap-3">
          <p className="font-semibold text-warn">{waiting.length} saved on this phone, not sent yet</p>
          <button
            type="button"
            className="btn btn-second ml-auto"
            onClick={() =>
              void flushOutbox(siteId, personId).then(() =>
                client.invalidateQueries({ queryKey: ['site', siteId] }),
              )
            }
          >
            Send now
          </button>
          <ul className="basis-full list-disc pl-5">
            {waiting.map((item) => (
              <li key={item.id}>
                {item.label}, saved {new Date(item.savedAt).toTimeString().slice(0, 5)}
              </li>
            ))}
          </ul>
        </div>
      )}
      {asking.map((item) => (
        <div key={item.id} className="flex flex-wrap items-center gap-3">
          <p>
            <span className="font-semibold text-warn">Needs your answer:</span> {item.label}. {item.problem}
          </p>
          <button
            type="button"
            className="link ml-auto min-h-12"
            onClick={() => void dropFromOutbox(item.id)}
          >
            Remove from this phone
          </button>
        </div>
      ))}
    </div>
  );
}
