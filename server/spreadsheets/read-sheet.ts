import { spawn } from 'node:child_process';
import { fileURLToPath } from 'node:url';
import { Problem } from '#shared/problems.ts';
import type { SheetFile } from '#shared/sheets/sheet.ts';
import type { UploadedFile } from '../http/route.ts';

const child = fileURLToPath(new URL('./read-sheet-child.ts', import.meta.url));
const root = fileURLToPath(new URL('../..', import.meta.url));
const secondsMax = 20;
const heapMb = 256;
const outputBytesMax = 120 * 1024 * 1024;

const oleHeader = Buffer.from([0xd0, 0xcf, 0x11, 0xe0]);
const zipHeader = Buffer.from([0x50, 0x4b]);

/** Looks at the name and the first bytes before anything is parsed. */
function refuseByHead({ name, bytes }: UploadedFile): void {
  const fail = (sentence: string) => {
    throw new Problem('file-not-readable', sentence);
  };
  if (bytes.length === 0) fail('The file is empty.');
  const extension = /\.([a-z0-9]+)$/i.exec(name)?.[1]?.toLowerCase();
  if (extension === 'xlsm') fail('The file holds macros. Save it as .xlsx without macros.');
  if (extension !== 'xlsx' && extension !== 'csv') fail('Send an .xlsx or .csv file.');
  if (bytes.subarray(0, 4).equals(oleHeader))
    fail('The file is saved in the old format or with a password. Save it as .xlsx without a password.');
  if (bytes.subarray(0, 5).toString('latin1') === '%PDF-')
    fail('This is a PDF, whatever its name says. Ask the laboratory for the spreadsheet.');
  const isZip = bytes.subarray(0, 2).equals(zipHeader);
  if (extension === 'xlsx' && !isZip)
    fail(
      'The file is named .xlsx but is not a workbook. Open it in a spreadsheet program and save it as .xlsx.',
    );
  if (extension === 'csv' && isZip)
    fail('The file is named .csv but is a workbook. Give it the ending .xlsx.');
}

/**
 * Reads an uploaded sheet in a child process with a small heap, a time limit and no secrets.
 * @throws Problem `file-not-readable` with one plain sentence; the main process is never at risk
 */
export async function readSheet(file: UploadedFile): Promise<SheetFile> {
  refuseByHead(file);
  const run = spawn(process.execPath, [`--max-old-space-size=${heapMb}`, '--import', 'tsx', child], {
    cwd: root,
    env: { PATH: process.env['PATH'] ?? '', TZ: 'UTC' },
    stdio: ['pipe', 'pipe', 'ignore'],
  });
  const tooComplex = new Problem(
    'file-not-readable',
    `The file is too complex to read within ${secondsMax} seconds and a fixed amount of memory. Send the sheet with the results only.`,
  );
  const output = await new Promise<string>((resolve, reject) => {
    const timer = setTimeout(() => run.kill('SIGKILL'), secondsMax * 1000);
    const chunks: Buffer[] = [];
    let size = 0;
    run.stdout.on('data', (chunk: Buffer) => {
      size += chunk.length;
      if (size > outputBytesMax) run.kill('SIGKILL');
      else chunks.push(chunk);
    });
    run.once('error', reject);
    run.once('close', (code) => {
      clearTimeout(timer);
      if (code === 0) resolve(Buffer.concat(chunks).toString('utf8'));
      else reject(tooComplex);
    });
    run.stdin.on('error', () => undefined);
    run.stdin.end(file.bytes);
  });
  const answer = JSON.parse(output) as { file?: SheetFile; refused?: string };
  if (!answer.file) throw new Problem('file-not-readable', answer.refused ?? tooComplex.message);
  return answer.file;
}
