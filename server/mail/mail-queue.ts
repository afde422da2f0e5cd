import { sql, type SQL } from 'drizzle-orm';
import { createTransport } from 'nodemailer';
import PgBoss from 'pg-boss';
import type { Logger } from 'pino';
import type { Transaction } from '../db/transaction.ts';

export interface Mail {
  to: string;
  subject: string;
  text: string;
}

export interface MailQueue {
  /** Queues a mail in the caller's transaction: it is sent if, and only if, the change is kept. */
  send(tx: Transaction, mail: Mail): Promise<void>;
}

/** A statement with $1, $2 … as a Drizzle statement with the same parameters. */
function withParameters(text: string, values: readonly unknown[]): SQL {
  const parts = text.split(/\$(\d+)/);
  const chunks = parts.map((part, index) =>
    index % 2 ? sql`${sql.param(values[Number(part) - 1])}` : sql.raw(part),
  );
  return sql.join(chunks);
}

/** Mail queue on the same PostgreSQL. */
export function createMailQueue(boss: PgBoss): MailQueue {
  return {
    async send(tx, mail) {
      await boss.send('mail', mail, {
        retryLimit: 5,
        retryBackoff: true,
        db: {
          executeSql: async (text: string, values: unknown[]) =>
            tx.execute(withParameters(text, values)) as never,
        },
      });
    },
  };
}

/** Starts the queue's worker, which hands each mail to the SMTP server. */
export async function startMailWorker(
  boss: PgBoss,
  smtpUrl: string,
  from: string,
  log: Logger,
): Promise<void> {
  const transport = createTransport(smtpUrl);
  await boss.work<Mail>('mail', { pollingIntervalSeconds: 1 }, async (jobs) => {
    for (const { data } of jobs) {
      await transport.sendMail({ from, to: data.to, subject: data.subject, text: data.text });
      log.info({ subject: data.subject }, 'mail sent');
    }
  });
}

/** Connects the queue as the application's role. */
export async function startQueue(appUrl: string, log: Logger): Promise<PgBoss> {
  const boss = new PgBoss({ connectionString: appUrl, schema: 'queue', migrate: false, max: 3 });
  boss.on('error', (error) => log.warn({ err: error }, 'queue'));
  await boss.start();
  return boss;
}
