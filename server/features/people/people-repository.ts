import { and, asc, eq, isNull, sql } from 'drizzle-orm';
import { memberships, people } from '../../db/schema/organisations.ts';
import { laboratories } from '../../db/schema/lab.ts';
import type { Transaction } from '../../db/transaction.ts';

/** Names of the people of the organisation by id. */
export async function listNames(tx: Transaction): Promise<Map<string, string>> {
  const rows = await tx.select({ id: people.id, displayName: people.displayName }).from(people);
  return new Map(rows.map((row) => [row.id, row.displayName]));
}

export const listPeopleOf = (tx: Transaction, siteId: string) =>
  tx
    .select({
      membershipId: memberships.id,
      personId: people.id,
      displayName: people.displayName,
      email: people.email,
      role: memberships.role,
      siteId: memberships.siteId,
      passwordHash: people.passwordHash,
    })
    .from(memberships)
    .innerJoin(people, eq(people.id, memberships.personId))
    .where(
      and(
        isNull(memberships.endedAt),
        sql`(${memberships.siteId} is null or ${memberships.siteId} = ${siteId})`,
      ),
    )
    .orderBy(asc(people.displayName));

/** E-mail addresses of people with one of the roles at a site. */
export async function listAddresses(tx: Transaction, siteId: string, roles: string[]): Promise<string[]> {
  const rows = await listPeopleOf(tx, siteId);
  return [...new Set(rows.filter((row) => roles.includes(row.role)).map((row) => row.email))];
}

export async function personForInvitation(
  tx: Transaction,
  id: string,
  email: string,
  displayName: string,
): Promise<string> {
  const found = await tx.execute<{ id: string }>(
    sql`select person_for_invitation(${id}, ${email}, ${displayName}) as id`,
  );
  return found.rows[0]!.id;
}

export const insertMembership = (tx: Transaction, row: typeof memberships.$inferInsert) =>
  tx.insert(memberships).values(row);

export async function endMembership(tx: Transaction, membershipId: string, endedAt: string) {
  const [row] = await tx
    .update(memberships)
    .set({ endedAt })
    .where(and(eq(memberships.id, membershipId), isNull(memberships.endedAt)))
    .returning();
  return row ?? null;
}

export const listLaboratories = (tx: Transaction) =>
  tx.select().from(laboratories).orderBy(asc(laboratories.name));
