import { mkdir, readFile, readdir, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { simpleParser } from 'mailparser';
import { SMTPServer } from 'smtp-server';

export interface CaughtMail {
  id: string;
  caughtAt: string;
  to: string;
  subject: string;
  text: string;
}

/**
 * A local SMTP server that keeps what it receives and sends nothing on.
 * @returns its URL, the mails caught so far (newest first), and a way to stop it
 */
export async function startMailCatcher(folder: string, now: () => Date) {
  await mkdir(folder, { recursive: true });
  let count = 0;
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ['STARTTLS', 'AUTH'],
    onData(stream, _session, done) {
      simpleParser(stream)
        .then(async (mail) => {
          const caughtAt = now().toISOString();
          const id = `${caughtAt.replace(/[:.]/g, '-')}-${String((count += 1)).padStart(4, '0')}`;
          const to = [mail.to ?? []]
            .flat()
            .map((address) => address.text)
            .join(', ');
          const caught: CaughtMail = { id, caughtAt, to, subject: mail.subject ?? '', text: mail.text ?? '' };
          await writeFile(join(folder, `${id}.json`), JSON.stringify(caught));
          done();
        })
        .catch(done);
    },
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  const address = server.server.address();
  const port = typeof address === 'object' && address ? address.port : 0;
  return {
    url: `smtp://127.0.0.1:${port}`,
    async list(): Promise<CaughtMail[]> {
      const names = (await readdir(folder))
        .filter((name) => name.endsWith('.json'))
        .sort()
        .reverse()
        .slice(0, 100);
      return Promise.all(
        names.map(async (name) => JSON.parse(await readFile(join(folder, name), 'utf8')) as CaughtMail),
      );
    },
    stop: () => new Promise<void>((resolve) => server.close(() => resolve())),
  };
}
