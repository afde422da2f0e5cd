import { createHash, randomBytes } from 'node:crypto';
import bcrypt from 'bcryptjs';
import type { Role } from '#shared/permissions.ts';
import type { MeView } from '#shared/schemas/access.ts';
import { Problem } from '#shared/problems.ts';
import { withOrganisation, type Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import { idleLimitMs, type SessionClaims } from '../../http/session-cookie.ts';
import { siteExists } from '../sites/site-repository.ts';
import { listSites } from '../sites/site-service.ts';
import * as repository from './access-repository.ts';

const passwordRounds = 12;
const hoursOfLink = { invitation: 7 * 24, 'password-reset': 2 } as const;
/** A hash nobody's password has, so that an unknown address takes as long as a known one. */
const unknownHash = '$2b$12$C6UzMDM.H6dfI/f/IKcEeO7ZxYwH5pLx1rYy1Yw3a8q5o9m9bq3rS';

export const hashPassword = (password: string): Promise<string> => bcrypt.hash(password, passwordRounds);
const hashSecret = (secret: string): string => createHash('sha256').update(secret).digest('hex');

/**
 * Who asks and with which roles.
 * @throws Problem `not-signed-in` for an ended, idle or unknown session; `not-found` for a site where the person has no role
 */
export async function findContext(
  tx: Transaction,
  claims: SessionClaims,
  siteId: string | null,
  now: Date,
  requestId: string,
): Promise<Context> {
  const found = await repository.findSession(tx, claims.sessionId);
  const lastSeenMs = found ? Date.parse(found.session.lastSeenAt) : 0;
  if (
    !found ||
    found.session.endedAt ||
    found.person.disabledAt ||
    now.getTime() - lastSeenMs > idleLimitMs
  ) {
    throw new Problem('not-signed-in', 'You have been signed out. Sign in to go on.');
  }
  if (now.getTime() - lastSeenMs > 3_600_000)
    await repository.touchSession(tx, claims.sessionId, now.toISOString());
  const held = await repository.listMemberships(tx, claims.personId);
  const here = held.filter((membership) => membership.siteId === null || membership.siteId === siteId);
  if (!held.length) throw new Problem('not-signed-in', 'You no longer belong to this organisation.');
  if (
    siteId !== null &&
    (!/^[0-9a-f-]{36}$/.test(siteId) || !here.length || !(await siteExists(tx, siteId)))
  ) {
    throw new Problem('not-found', 'There is no such site, or you have no role there.');
  }
  const roles = [...new Set(here.map((membership) => membership.role as Role))];
  const isOnlyLab = roles.length > 0 && roles.every((role) => role === 'lab');
  return {
    organisationId: claims.organisationId,
    personId: claims.personId,
    sessionId: claims.sessionId,
    siteId,
    roles,
    laboratoryId: isOnlyLab
      ? (here.find((membership) => membership.laboratoryId)?.laboratoryId ?? null)
      : null,
    requestId,
  };
}

async function openSession(
  deps: Dependencies,
  personId: string,
  organisationId: string,
  device: string | undefined,
): Promise<SessionClaims> {
  const claims = { sessionId: deps.newId(), personId, organisationId };
  const at = deps.now().toISOString();
  await withOrganisation(deps.database, claims, (tx) =>
    repository.insertSession(tx, {
      organisationId,
      id: claims.sessionId,
      personId,
      createdAt: at,
      lastSeenAt: at,
      device: device?.slice(0, 200) ?? null,
    }),
  );
  return claims;
}

const beforeSignIn = <T>(deps: Dependencies, work: (tx: Transaction) => Promise<T>) =>
  withOrganisation(deps.database, { organisationId: null, personId: null }, work);

/** Signs a person in with a password. The answer is the same for an unknown address and a wrong password. */
export async function signIn(
  deps: Dependencies,
  input: { email: string; password: string; organisationId?: string | undefined },
  device?: string,
): Promise<SessionClaims> {
  const found = await beforeSignIn(deps, (tx) => repository.findForSignIn(tx, input.email));
  const isRight = await bcrypt.compare(input.password, found?.passwordHash ?? unknownHash);
  const organisation = found?.organisations.find(
    (one) => !input.organisationId || one.id === input.organisationId,
  );
  if (!found || !isRight || found.isDisabled || !organisation) {
    throw new Problem(
      'sign-in-failed',
      'The e-mail address and password do not match. Check both, or ask for a new password.',
    );
  }
  return openSession(deps, found.personId, organisation.id, device);
}

/** Signs a visitor in as one of the invented people of the demo; refused for everyone else. */
export async function signInToDemo(
  deps: Dependencies,
  email: string,
  device?: string,
): Promise<SessionClaims> {
  const people = await beforeSignIn(deps, repository.listDemoPeople);
  const person = people.find((one) => one.email === email);
  const found = person && (await beforeSignIn(deps, (tx) => repository.findForSignIn(tx, email)));
  if (!person || !found)
    throw new Problem(
      'sign-in-failed',
      'Only the invented people of the demo can come in without a password.',
    );
  return openSession(deps, found.personId, person.organisationId, device);
}

export const listDemoPeople = (deps: Dependencies) => beforeSignIn(deps, repository.listDemoPeople);
export const installationState = (deps: Dependencies) => beforeSignIn(deps, repository.installationState);

export async function signOut(deps: Dependencies, claims: SessionClaims): Promise<void> {
  await withOrganisation(deps.database, claims, (tx) =>
    repository.endSession(tx, claims.sessionId, deps.now().toISOString()),
  );
}

/** Makes a single-use link and puts it in the mail; only the hash of its secret is kept. */
export async function sendAccessLink(
  tx: Transaction,
  deps: Dependencies,
  to: { organisationId: string; personId: string; email: string; displayName: string },
  purpose: keyof typeof hoursOfLink,
): Promise<void> {
  const secret = randomBytes(32).toString('base64url');
  const now = deps.now();
  await repository.insertAccessLink(tx, {
    organisationId: to.organisationId,
    id: deps.newId(),
    personId: to.personId,
    purpose,
    secretHash: hashSecret(secret),
    createdAt: now.toISOString(),
    expiresAt: new Date(now.getTime() + hoursOfLink[purpose] * 3_600_000).toISOString(),
  });
  const link = `${deps.publicUrl}/password?secret=${secret}`;
  const invitation = purpose === 'invitation';
  await deps.mail.send(tx, {
    to: to.email,
    subject: invitation ? 'Your invitation to Tallyweir' : 'A new password for Tallyweir',
    text: [
      `${to.displayName},`,
      invitation
        ? 'you have been invited to keep the leachate record with Tallyweir.'
        : 'somebody asked for a new password for this address.',
      `Choose a password here: ${link}`,
      invitation
        ? 'The link works once, for seven days.'
        : 'The link works once, for two hours. If it was not you, nothing needs to be done.',
    ].join('\n\n'),
  });
}

/** Sends a reset link when the address is known; says nothing either way. */
export async function askForPasswordReset(deps: Dependencies, email: string): Promise<void> {
  const found = await beforeSignIn(deps, (tx) => repository.findForSignIn(tx, email));
  const organisation = found?.organisations[0];
  if (!found || found.isDisabled || !organisation) return;
  await withOrganisation(deps.database, { organisationId: organisation.id, personId: found.personId }, (tx) =>
    sendAccessLink(
      tx,
      deps,
      { organisationId: organisation.id, personId: found.personId, email, displayName: found.displayName },
      'password-reset',
    ),
  );
}

/** Sets a password by a link, ends every other session of the person, and signs them in. */
export async function setPasswordByLink(
  deps: Dependencies,
  input: { secret: string; password: string },
  device?: string,
): Promise<SessionClaims> {
  const link = await beforeSignIn(deps, (tx) => repository.findAccessLink(tx, hashSecret(input.secret)));
  const now = deps.now();
  if (!link || link.used_at || Date.parse(link.expires_at) < now.getTime()) {
    throw new Problem('link-ended', 'This link was used already or is too old. Ask for a new one.');
  }
  const passwordHash = await hashPassword(input.password);
  await withOrganisation(
    deps.database,
    { organisationId: link.organisation_id, personId: link.person_id },
    async (tx) => {
      await repository.useAccessLink(tx, link.id, now.toISOString());
      await repository.setPasswordHash(tx, link.person_id, passwordHash);
      await repository.endSessionsOf(tx, link.person_id, now.toISOString());
    },
  );
  return openSession(deps, link.person_id, link.organisation_id, device);
}

/** Makes the first organisation with its administrator; only on an empty installation. */
export async function startFirstRun(
  deps: Dependencies,
  input: { organisationName: string; displayName: string; email: string; password: string },
  device?: string,
): Promise<SessionClaims> {
  const ids = { organisationId: deps.newId(), personId: deps.newId() };
  const passwordHash = await hashPassword(input.password);
  const made = await beforeSignIn(deps, (tx) =>
    repository.foundOrganisation(tx, {
      ...ids,
      name: input.organisationName,
      isDemo: false,
      email: input.email,
      displayName: input.displayName,
      passwordHash,
    }),
  );
  if (!made)
    throw new Problem(
      'already-done',
      'This installation already has an organisation. Ask its administrator for an invitation.',
    );
  return openSession(deps, ids.personId, ids.organisationId, device);
}

/** Who is signed in, at which sites, with which roles. */
export async function readMe(tx: Transaction, context: Context, deps: Dependencies): Promise<MeView> {
  const session = (await repository.findSession(tx, context.sessionId))!;
  return {
    personId: context.personId,
    displayName: session.person.displayName,
    email: session.person.email,
    organisationId: context.organisationId,
    organisationName: session.organisation.name,
    roles: context.roles,
    sites: await listSites(tx, context, deps),
  };
}
