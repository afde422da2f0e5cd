import { and, eq, isNull, sql } from 'drizzle-orm';
import { accessLinks, memberships, organisations, people, sessions } from '../../db/schema/organisations.ts';
import type { Transaction } from '../../db/transaction.ts';

export interface SignInRecord {
  personId: string;
  passwordHash: string | null;
  displayName: string;
  isDisabled: boolean;
  organisations: { id: string; name: string }[];
}

/** The one look-up across organisations, through a function that runs as the owner. */
export async function findForSignIn(tx: Transaction, email: string): Promise<SignInRecord | null> {
  const found = await tx.execute<{
    person_id: string;
    password_hash: string | null;
    display_name: string;
    disabled_at: string | null;
    organisations: { id: string; name: string }[];
  }>(sql`select * from sign_in_lookup(${email})`);
  const row = found.rows[0];
  if (!row) return null;
  return {
    personId: row.person_id,
    passwordHash: row.password_hash,
    displayName: row.display_name,
    isDisabled: row.disabled_at !== null,
    organisations: row.organisations,
  };
}

export async function listDemoPeople(tx: Transaction) {
  const found = await tx.execute<{
    email: string;
    display_name: string;
    role: string;
    organisation_id: string;
  }>(sql`select * from demo_people()`);
  return found.rows.map((row) => ({
    email: row.email,
    displayName: row.display_name,
    role: row.role,
    organisationId: row.organisation_id,
  }));
}

export async function installationState(tx: Transaction) {
  const found = await tx.execute<{ organisation_count: string; has_demo: boolean }>(
    sql`select * from installation_state()`,
  );
  return {
    organisationCount: Number(found.rows[0]?.organisation_count ?? 0),
    hasDemo: found.rows[0]?.has_demo ?? false,
  };
}

export async function insertSession(tx: Transaction, row: typeof sessions.$inferInsert): Promise<void> {
  await tx.insert(sessions).values(row);
}

export async function findSession(tx: Transaction, sessionId: string) {
  const [row] = await tx
    .select({ session: sessions, person: people, organisation: organisations })
    .from(sessions)
    .innerJoin(people, eq(people.id, sessions.personId))
    .innerJoin(organisations, eq(organisations.id, sessions.organisationId))
    .where(eq(sessions.id, sessionId));
  return row ?? null;
}

export async function touchSession(tx: Transaction, sessionId: string, at: string): Promise<void> {
  await tx.update(sessions).set({ lastSeenAt: at }).where(eq(sessions.id, sessionId));
}

export async function endSession(tx: Transaction, sessionId: string, at: string): Promise<void> {
  await tx
    .update(sessions)
    .set({ endedAt: at })
    .where(and(eq(sessions.id, sessionId), isNull(sessions.endedAt)));
}

export async function endSessionsOf(tx: Transaction, personId: string, at: string): Promise<void> {
  await tx
    .update(sessions)
    .set({ endedAt: at })
    .where(and(eq(sessions.personId, personId), isNull(sessions.endedAt)));
}

export const listMemberships = (tx: Transaction, personId: string) =>
  tx
    .select()
    .from(memberships)
    .where(and(eq(memberships.personId, personId), isNull(memberships.endedAt)));

export async function insertAccessLink(tx: Transaction, row: typeof accessLinks.$inferInsert): Promise<void> {
  await tx.insert(accessLinks).values(row);
}

export async function findAccessLink(tx: Transaction, secretHash: string) {
  const found = await tx.execute<{
    organisation_id: string;
    id: string;
    person_id: string;
    email: string;
    purpose: string;
    expires_at: string;
    used_at: string | null;
  }>(sql`select * from access_link_lookup(${secretHash})`);
  return found.rows[0] ?? null;
}

export async function useAccessLink(tx: Transaction, id: string, at: string): Promise<void> {
  await tx
    .update(accessLinks)
    .set({ usedAt: at })
    .where(and(eq(accessLinks.id, id), isNull(accessLinks.usedAt)));
}

export async function setPasswordHash(
  tx: Transaction,
  personId: string,
  passwordHash: string,
): Promise<void> {
  await tx.update(people).set({ passwordHash }).where(eq(people.id, personId));
}

export async function foundOrganisation(
  tx: Transaction,
  row: {
    organisationId: string;
    name: string;
    isDemo: boolean;
    personId: string;
    email: string;
    displayName: string;
    passwordHash: string;
  },
): Promise<boolean> {
  const made = await tx.execute<{ made: boolean }>(
    sql`select found_organisation(${row.organisationId}, ${row.name}, ${row.isDemo}, ${row.personId}, ${row.email}, ${row.displayName}, ${row.passwordHash}) as made`,
  );
  return made.rows[0]?.made ?? false;
}
