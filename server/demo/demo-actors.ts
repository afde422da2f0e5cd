import type { Context, Dependencies } from '../http/route.ts';
import type { demoPeople } from './demo-people.ts';

/** Who acts in the demo, and at which moment. */
export interface DemoActors {
  /** Someone of the demo at the site, at a given moment. */
  as: (role: (typeof demoPeople)[number]['key'], siteId: string | null) => Context;
  at: (instant: string) => Dependencies;
}
