import * as z from 'zod';

const schema = z.object({
  NODE_ENV: z.enum(['development', 'production', 'test']).default('development'),
  PORT: z.coerce.number().int().min(0).max(65535).default(5180),
  /** Set by the start script: superuser of the project's own cluster. */
  CLUSTER_ADMIN_URL: z.string().optional(),
  /** A database of the operator's own: its owner, and the role the server may use. */
  DATABASE_URL: z.string().optional(),
  APP_DATABASE_URL: z.string().optional(),
  DATA_FOLDER: z.string().default('.tallyweir'),
  LOAD_DEMO: z.enum(['yes', 'no']).optional(),
  SMTP_URL: z.string().optional(),
  MAIL_FROM: z.string().default('Tallyweir <record@tallyweir.invalid>'),
  PUBLIC_URL: z.string().optional(),
});

export type Env = z.infer<typeof schema>;

/**
 * Reads the environment once.
 * @throws Error with one sentence per wrong setting
 */
export function readEnv(source: NodeJS.ProcessEnv): Env {
  const parsed = schema.safeParse(source);
  if (!parsed.success) {
    throw new Error(
      parsed.error.issues.map((issue) => `${issue.path.join('.')}: ${issue.message}`).join('\n'),
    );
  }
  if (parsed.data.DATABASE_URL && !parsed.data.APP_DATABASE_URL) {
    throw new Error(
      'DATABASE_URL names the owner of the database. Set APP_DATABASE_URL too, with the role tallyweir_app: the server never works as the owner.',
    );
  }
  return parsed.data;
}
