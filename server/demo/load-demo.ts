import { eq } from 'drizzle-orm';
import { addDays } from '#shared/calendar/day.ts';
import { createSiteDays } from '#shared/calendar/site-days.ts';
import { memberships, organisations } from '../db/schema/organisations.ts';
import { withOrganisation, type Transaction } from '../db/transaction.ts';
import { foundOrganisation, installationState } from '../features/access/access-repository.ts';
import { hashPassword } from '../features/access/access-service.ts';
import { insertMembership, personForInvitation } from '../features/people/people-repository.ts';
import type { Dependencies } from '../http/route.ts';
import { insertLaboratory, insertQualifier } from '../features/lab/lab-repository.ts';
import { demoPeople } from './demo-people.ts';
import type { DemoActors } from './demo-actors.ts';
import { planDemo } from './demo-plan.ts';
import { makeDemoSite } from './demo-site.ts';
import { generateWeather } from './demo-weather.ts';
import { loadRecord, loadWeather } from './load-record.ts';
import { makePermit } from './load-permit.ts';
import { tellStory } from './load-story.ts';
import { createRandom } from './random.ts';

const seed = 20_260_301;

async function makePeople(
  tx: Transaction,
  organisationId: string,
  newId: () => string,
  laboratoryId: string,
): Promise<Map<string, string>> {
  const ids = new Map<string, string>();
  for (const person of demoPeople) {
    const personId = await personForInvitation(tx, newId(), person.email, person.displayName);
    ids.set(person.key, personId);
    const [held] = await tx.select().from(memberships).where(eq(memberships.personId, personId));
    if (!held)
      await insertMembership(tx, {
        organisationId,
        id: newId(),
        personId,
        role: person.key,
        laboratoryId: person.key === 'lab' ? laboratoryId : null,
      });
  }
  return ids;
}

/**
 * Loads the invented organisation into an empty database: two full years and the running quarter, from a fixed seed
 * and the day it is loaded. A second call changes nothing.
 */
export async function loadDemo(deps: Dependencies): Promise<void> {
  const nobody = { organisationId: null, personId: null };
  const state = await withOrganisation(deps.database, nobody, installationState);
  if (state.organisationCount > 0) return;
  deps.log.info('loading the demo');
  const random = createRandom(seed);
  const organisationId = random.id();
  const admin = demoPeople.find((person) => person.key === 'admin')!;
  const adminId = random.id();
  const passwordHash = await hashPassword(crypto.randomUUID());
  await withOrganisation(deps.database, nobody, (tx) =>
    foundOrganisation(tx, {
      organisationId,
      name: 'Varrow Hill Waste Company',
      isDemo: true,
      personId: adminId,
      email: admin.email,
      displayName: admin.displayName,
      passwordHash,
    }),
  );
  const wall = { organisationId, personId: adminId };
  const laboratoryId = random.id();
  const people = await withOrganisation(deps.database, wall, async (tx) => {
    await tx.select().from(organisations);
    await insertLaboratory(tx, { organisationId, id: laboratoryId, name: 'Pellam Laboratory' });
    for (const [letter, meaning, wording] of [
      ['U', 'non-detect', 'not detected at RL'],
      ['J', 'estimated-below-reporting', 'estimated below RL'],
    ] as const) {
      await insertQualifier(tx, { organisationId, id: random.id(), laboratoryId, letter, meaning, wording });
    }
    return makePeople(tx, organisationId, random.id, laboratoryId);
  });
  const actors: DemoActors = {
    as: (role, siteId) => ({
      organisationId,
      personId: people.get(role)!,
      sessionId: '',
      siteId,
      roles: [role],
      laboratoryId: role === 'lab' ? laboratoryId : null,
      requestId: 'demo',
    }),
    at: (instant) => ({ ...deps, now: () => new Date(instant), newId: random.id }),
  };
  const today = createSiteDays([
    { validFromOn: '2011-05-02', timeZone: 'Europe/London', dayBoundary: '00:00' },
  ]).dayOf(deps.now().getTime());
  const plan = planDemo(today);
  const weather = generateWeather(random, plan.start, addDays(today, -1), plan.wetMonth);
  await withOrganisation(deps.database, wall, async (tx) => {
    const engineer = actors.as('engineer', null);
    const ids = await makeDemoSite(tx, engineer, actors.at(`${addDays(today, -1)}T09:00:00Z`), plan, random);
    await loadWeather(tx, actors, ids, weather, random);
    await makePermit(tx, actors, ids, plan, random);
    await loadRecord(tx, actors, ids, plan, weather, random);
    await tellStory(tx, actors, ids, plan, random);
  });
}
