import { useEffect, useState } from 'react';
import { listOutbox, onOutboxChange, type OutboxItem } from '../../lib/outbox.ts';

/** What is kept on this device for a site, as it stands now. */
export function useOutbox(siteId: string): OutboxItem[] {
  const [items, setItems] = useState<OutboxItem[]>([]);
  useEffect(() => {
    const refresh = () => void listOutbox(siteId).then(setItems, () => setItems([]));
    refresh();
    return onOutboxChange(refresh);
  }, [siteId]);
  return items;
}
