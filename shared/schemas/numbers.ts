import * as z from 'zod';
import { parseNumber } from '../ledger/parse-number.ts';

interface NumberRule {
  /** The label's words, for the message: 'the lined area'. */
  what: string;
  unit: string;
  min?: number;
  minExclusive?: number;
  max?: number;
  /** What to do when the value is above `max`. */
  aboveMax?: string;
  decimals?: number;
}

/**
 * A number as a person types it, kept as exact decimal text.
 * All messages repeat the label and say what to do.
 */
export const typedNumber = ({ what, unit, min, minExclusive, max, aboveMax, decimals = 3 }: NumberRule) =>
  z
    .union([z.string(), z.number()], { error: `Enter ${what}${unit ? ` in ${unit}` : ''}.` })
    .transform((typed, context) => {
      const text = String(typed);
      const label = what[0]!.toUpperCase() + what.slice(1);
      const fail = (message: string) => {
        context.addIssue({ code: 'custom', message });
        return z.NEVER;
      };
      if (text.trim() === '') return fail(`Enter ${what}${unit ? ` in ${unit}` : ''}.`);
      const parsed = parseNumber(text, { decimals, unit });
      if (parsed.kind === 'wrong') return fail(`${label}: ${parsed.reason}`);
      if (parsed.kind === 'ask') return fail(`${label}: ${parsed.question} Enter it without a comma.`);
      const value = Number(parsed.value);
      const withUnit = (bound: number) => `${bound}${unit ? ` ${unit}` : ''}`;
      if (minExclusive !== undefined && value <= minExclusive)
        return fail(`${label} must be more than ${withUnit(minExclusive)}.`);
      if (min !== undefined && value < min) return fail(`${label} must be ${withUnit(min)} or more.`);
      if (max !== undefined && value > max)
        return fail(`${label} must be ${withUnit(max)} or less.${aboveMax ? ` ${aboveMax}` : ''}`);
      return parsed.value;
    });

/** A whole number within bounds; one sentence names both. @param what the label's words */
export const wholeNumber = (what: string, min: number, max: number) => {
  const label = what[0]!.toUpperCase() + what.slice(1);
  const sentence = `${label} must be a whole number from ${min} to ${max}.`;
  return z.coerce.number(sentence).int(sentence).min(min, sentence).max(max, sentence);
};

/** The same, but may be left empty. */
export const optionalWholeNumber = (what: string, min: number, max: number) =>
  z.preprocess(
    (typed) => (typed === '' || typed === null ? undefined : typed),
    wholeNumber(what, min, max).optional(),
  );

/** The same as a typed number, but may be left empty. */
export const optionalNumber = (rule: NumberRule) =>
  z.preprocess((typed) => (typed === '' || typed === null ? undefined : typed), typedNumber(rule).optional());
