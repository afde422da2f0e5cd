import type * as z from 'zod';
import { Problem, type FieldProblem } from '#shared/problems.ts';

type Part = 'params' | 'query' | 'body';

/**
 * Parses the parts of a request against their schemas and reports every wrong field at once.
 * @throws Problem `fields-need-another-look`; a wrong path parameter is `not-found`
 */
export function validate(
  schemas: Partial<Record<Part, z.ZodType | undefined>>,
  values: Record<Part, unknown>,
): Record<Part, never> {
  const errors: FieldProblem[] = [];
  const parsed = { params: undefined, query: undefined, body: undefined } as Record<Part, unknown>;
  for (const part of ['params', 'query', 'body'] as const) {
    const schema = schemas[part];
    if (!schema) continue;
    const result = schema.safeParse(values[part] ?? {});
    if (result.success) {
      parsed[part] = result.data;
      continue;
    }
    if (part === 'params') throw new Problem('not-found', 'There is no record at this address.');
    for (const issue of result.error.issues) {
      const pointer = part === 'body' ? `/${issue.path.join('/')}` : `/${part}/${issue.path.join('/')}`;
      errors.push({ pointer, detail: issue.message });
    }
  }
  if (errors.length) {
    const detail = errors.length === 1 ? errors[0]!.detail : `${errors.length} answers need another look.`;
    throw new Problem('fields-need-another-look', detail, errors);
  }
  return parsed as Record<Part, never>;
}
