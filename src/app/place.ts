import { useOutletContext } from 'react-router';
import { isAllowed, type Permission } from '#shared/permissions.ts';
import type { MeView, SiteView } from '#shared/schemas/access.ts';

/** Where the reader is: site, month, and what they may do there. */
export interface Place {
  me: MeView;
  site: SiteView;
  /** Chosen month, also on pages without one. */
  month: string;
}

export function usePlace(): Place & { can: (permission: Permission) => boolean } {
  const place = useOutletContext<Place>();
  return { ...place, can: (permission) => isAllowed(place.site.roles, permission) };
}
