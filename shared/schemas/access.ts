import * as z from 'zod';
import { roles } from '../permissions.ts';
import { emailAddress, optionalId, recordId, requiredText } from './text.ts';

/** A new password: long rather than odd. */
export const newPassword = z
  .string({ error: 'Enter a password.' })
  .min(12, 'Use at least 12 characters. A few words in a row are easy to remember.')
  .refine((text) => new TextEncoder().encode(text).length <= 72, 'Use at most 72 characters.');

export const signInInput = z.object({
  email: emailAddress,
  password: z.string({ error: 'Enter your password.' }).min(1, 'Enter your password.'),
  organisationId: optionalId,
});
export type SignInInput = z.input<typeof signInInput>;

export const demoSignInInput = z.object({ email: emailAddress });
export const passwordResetInput = z.object({ email: emailAddress });
export const accessLinkInput = z.object({
  secret: z.string().min(20, 'The link is not complete.'),
  password: newPassword,
});

export const firstRunInput = z.object({
  organisationName: requiredText('the name of the organisation'),
  displayName: requiredText('your name'),
  email: emailAddress,
  password: newPassword,
});

export const invitationInput = z
  .object({
    id: recordId,
    email: emailAddress,
    displayName: requiredText('the name of the person'),
    role: z.enum(roles, { error: 'Choose a role.' }),
    laboratoryId: optionalId,
  })
  .refine((input) => input.role !== 'lab' || input.laboratoryId, {
    path: ['laboratoryId'],
    message: 'Choose the laboratory the person works for.',
  });
export type InvitationInput = z.input<typeof invitationInput>;

export const membershipView = z.object({
  siteId: recordId.nullable(),
  role: z.enum(roles),
  laboratoryId: recordId.nullable(),
});

export const siteView = z.object({
  id: recordId,
  slug: z.string(),
  name: z.string(),
  roles: z.array(z.enum(roles)),
  today: z.string(),
  displayUnits: z.enum(['metric', 'us']),
});

/** Who is signed in, and the sites they can go to. */
export const meView = z.object({
  personId: recordId,
  displayName: z.string(),
  email: z.string(),
  organisationId: recordId,
  organisationName: z.string(),
  roles: z.array(z.enum(roles)),
  sites: z.array(siteView),
});
export type MeView = z.infer<typeof meView>;
export type SiteView = z.infer<typeof siteView>;

export const personView = z.object({
  membershipId: recordId,
  personId: recordId,
  displayName: z.string(),
  email: z.string(),
  role: z.enum(roles),
  hasPassword: z.boolean(),
});
export type PersonView = z.infer<typeof personView>;
