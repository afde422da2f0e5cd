import * as z from 'zod';
import { isDay } from '../calendar/day.ts';
import { isMonth } from '../calendar/month.ts';

/** A calendar day. @param what the label's words */
export const dayText = (what: string) =>
  z
    .string({ error: `Enter ${what}.` })
    .trim()
    .refine((text) => text !== '', `Enter ${what}.`)
    .refine(
      (text) => text === '' || isDay(text),
      `${what[0]!.toUpperCase()}${what.slice(1)} must be a day of the calendar, like 2026-03-04.`,
    );

export const optionalDay = (what: string) =>
  z.preprocess((typed) => (typed === '' ? undefined : typed), dayText(what).optional());

export const monthText = z.string().refine(isMonth, 'Choose a month like 2026-03.');
