import type * as z from 'zod';
import { roleNames } from '#shared/permissions.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { invitationInput } from '#shared/schemas/access.ts';
import type { PeopleView } from '#shared/views/site-view.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { sendAccessLink } from '../access/access-service.ts';
import { siteOf } from '../sites/site-service.ts';
import * as repository from './people-repository.ts';

/** People with a role at the site, and the laboratories an invitation can name. */
export async function readPeople(tx: Transaction, context: Context): Promise<PeopleView> {
  const rows = await repository.listPeopleOf(tx, siteOf(context));
  return {
    people: rows.map(({ passwordHash, ...row }) => ({ ...row, hasPassword: passwordHash !== null })),
    laboratories: await repository.listLaboratories(tx),
  };
}

/** Gives a person a role at this site and sends them a link to choose a password. */
export async function invite(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof invitationInput>,
) {
  const siteId = siteOf(context);
  const before = await repository.listPeopleOf(tx, siteId);
  if (before.some((row) => row.email === input.email && row.role === input.role)) {
    throw fieldProblem('/email', `${input.email} is ${roleNames[input.role]} here already.`);
  }
  if (
    input.laboratoryId &&
    !(await repository.listLaboratories(tx)).some((one) => one.id === input.laboratoryId)
  ) {
    throw fieldProblem('/laboratoryId', 'Choose a laboratory of this organisation.');
  }
  const personId = await repository.personForInvitation(tx, deps.newId(), input.email, input.displayName);
  await repository.insertMembership(tx, {
    organisationId: context.organisationId,
    id: input.id,
    personId,
    siteId,
    role: input.role,
    laboratoryId: input.laboratoryId ?? null,
  });
  await sendAccessLink(
    tx,
    deps,
    { organisationId: context.organisationId, personId, email: input.email, displayName: input.displayName },
    'invitation',
  );
  await recordChange(tx, context, {
    action: 'invite',
    subjectType: 'memberships',
    subjectId: input.id,
    sentence: `${input.displayName} was invited as ${roleNames[input.role]}.`,
    after: { personId, role: input.role },
  });
  return { id: input.id, personId };
}

/** Takes a role away. The person and everything they recorded stay. */
export async function endRole(tx: Transaction, context: Context, deps: Dependencies, membershipId: string) {
  const rows = await repository.listPeopleOf(tx, siteOf(context));
  const row = rows.find((one) => one.membershipId === membershipId);
  if (!row) throw new Problem('not-found', 'This person holds no such role here.');
  if (row.role === 'admin' && rows.filter((one) => one.role === 'admin').length === 1) {
    throw new Problem('not-ready', 'This is the only administrator. Give the role to somebody else first.');
  }
  await repository.endMembership(tx, membershipId, deps.now().toISOString());
  await recordChange(tx, context, {
    action: 'end',
    subjectType: 'memberships',
    subjectId: membershipId,
    sentence: `${row.displayName} is no longer ${roleNames[row.role as keyof typeof roleNames]} here.`,
    before: { personId: row.personId, role: row.role },
  });
  return { id: membershipId };
}
