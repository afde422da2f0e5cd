import * as z from 'zod';

/** Text a person must give: trimmed, not empty. @param what the label's words, for the message */
export const requiredText = (what: string, lengthMax = 200) =>
  z
    .string({ error: `Enter ${what}.` })
    .trim()
    .min(1, `Enter ${what}.`)
    .max(lengthMax, `${what[0]!.toUpperCase()}${what.slice(1)} can have at most ${lengthMax} characters.`);

export const optionalText = (lengthMax = 2000) =>
  z
    .string()
    .trim()
    .max(lengthMax, `Use at most ${lengthMax} characters.`)
    .optional()
    .transform((text) => (text === '' ? undefined : text));

export const recordId = z.uuid('This is not the id of a record.');
/** A record a person chooses from a list. @param what the label's words, for the message */
export const chosenId = (what: string) => z.uuid(`Choose ${what}.`);
/** A choice that may be left empty. */
export const optionalId = z.preprocess(
  (chosen) => (chosen === '' || chosen === null ? undefined : chosen),
  recordId.optional(),
);

export const emailAddress = z
  .string({ error: 'Enter an e-mail address.' })
  .trim()
  .toLowerCase()
  .pipe(z.email('Enter an e-mail address like name@example.org.'));
