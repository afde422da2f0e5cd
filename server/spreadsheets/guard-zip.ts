import yauzl from 'yauzl';

/** A file that is refused before it is read, with the sentence that says why. */
export class FileRefused extends Error {}

const entriesMax = 200;
const totalBytesMax = 100 * 1024 * 1024;
const ratioMax = 200;
const ratioFromBytes = 1024 * 1024;
const mergesMax = 5_000;

export interface WorkbookParts {
  /** Merged ranges by the path of their sheet part. */
  merges: Map<string, string[]>;
}

function checkEntry(entry: yauzl.Entry, seen: Set<string>): void {
  const name = entry.fileName;
  if (seen.has(name))
    throw new FileRefused(
      'The file holds one part twice. Open it in a spreadsheet program and save it again.',
    );
  seen.add(name);
  if (name.includes('..') || name.startsWith('/') || name.includes('\\'))
    throw new FileRefused('The file holds a part with an unsafe name and was refused.');
  if (entry.generalPurposeBitFlag & 1)
    throw new FileRefused('The file is protected with a password. Save it without one.');
  if (
    entry.uncompressedSize > ratioFromBytes &&
    entry.uncompressedSize > ratioMax * Math.max(1, entry.compressedSize)
  ) {
    throw new FileRefused(
      'The file unpacks to far more than it should and was refused. Send the sheet with the results only.',
    );
  }
  if (/vbaProject/i.test(name))
    throw new FileRefused('The file holds macros. Save it as .xlsx without macros.');
  if (/externalLink/i.test(name))
    throw new FileRefused('The file has links to other workbooks. Copy the values only and save it again.');
}

/** Inflates a part, counting real bytes because declared sizes can lie. */
async function readPart(
  zip: yauzl.ZipFile,
  entry: yauzl.Entry,
  onText: (text: string) => void,
): Promise<number> {
  return new Promise((resolve, reject) => {
    zip.openReadStream(entry, (error, stream) => {
      if (error || !stream) return reject(error ?? new Error('no stream'));
      let bytes = 0;
      stream.on('data', (chunk: Buffer) => {
        bytes += chunk.length;
        if (bytes > totalBytesMax)
          stream.destroy(new FileRefused('The file unpacks to more than 100 MB and was refused.'));
        onText(chunk.toString('latin1'));
      });
      stream.on('end', () => resolve(bytes));
      stream.on('error', reject);
    });
  });
}

/**
 * Checks an .xlsx before any library reads it: parts, sizes, ratio, overlap, names, macros, links, document types.
 * Also collects merged ranges, which the streaming reader leaves out.
 * @throws FileRefused with a plain sentence
 */
export async function guardZip(bytes: Buffer): Promise<WorkbookParts> {
  const zip = await new Promise<yauzl.ZipFile>((resolve, reject) => {
    yauzl.fromBuffer(bytes, { lazyEntries: true, validateEntrySizes: true }, (error, opened) =>
      error || !opened ? reject(error ?? new Error('no zip')) : resolve(opened),
    );
  });
  if (zip.entryCount > entriesMax)
    throw new FileRefused(`The file holds ${zip.entryCount} parts; a workbook has fewer than ${entriesMax}.`);
  const seen = new Set<string>();
  const offsets: { from: number; to: number }[] = [];
  const merges = new Map<string, string[]>();
  let total = 0;
  await new Promise<void>((resolve, reject) => {
    const next = async (entry: yauzl.Entry) => {
      checkEntry(entry, seen);
      const from = entry.relativeOffsetOfLocalHeader;
      offsets.push({ from, to: from + 30 + entry.compressedSize });
      const found: string[] = [];
      let tail = '';
      total += await readPart(zip, entry, (text) => {
        const window = tail + text;
        if (window.includes('<!DOCTYPE') || window.includes('<!ENTITY'))
          throw new FileRefused(
            'The file declares document types, which no workbook needs, and was refused.',
          );
        for (const match of window.matchAll(/<mergeCell ref="([A-Z0-9:]+)"\s*\/?>/g)) {
          if (match.index + match[0].length > tail.length) found.push(match[1]!);
        }
        tail = window.slice(-200);
      });
      if (total > totalBytesMax)
        throw new FileRefused('The file unpacks to more than 100 MB and was refused.');
      if (found.length > mergesMax)
        throw new FileRefused('The file holds thousands of merged cells. Unmerge them and save it again.');
      if (found.length) merges.set(entry.fileName, found);
      zip.readEntry();
    };
    zip.on('entry', (entry: yauzl.Entry) => void next(entry).catch(reject));
    zip.on('end', resolve);
    zip.on('error', reject);
    zip.readEntry();
  });
  const sorted = offsets.sort((a, b) => a.from - b.from);
  if (sorted.some((one, index) => index > 0 && one.from < sorted[index - 1]!.to))
    throw new FileRefused('Parts of the file overlap, which no program writes, and it was refused.');
  if (![...seen].some((name) => /(^|\/)workbook\.xml$/.test(name)))
    throw new FileRefused('This is a zip file, but no workbook. Save the sheet as .xlsx or .csv.');
  return { merges };
}
