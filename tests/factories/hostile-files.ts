import JSZip from 'jszip';
import { workbookOf } from './workbooks.ts';

const head = ['Client ID', 'Sampled', 'Parameter', 'Result', 'Units', 'RL'];

/** A small good sheet of results. */
export const goodWorkbook = () =>
  workbookOf({
    Results: [
      head,
      ['EFF-1', '2026-03-16', 'TSS', 14, 'mg/L', 2],
      ['EFF-1', '2026-03-16', 'BOD5', 9, 'mg/L', 2],
    ],
  });

/** The good workbook with one of its parts written anew. */
async function withPart(
  part: string,
  change: (xml: string) => string,
  more: Record<string, string> = {},
): Promise<Buffer> {
  const zip = await JSZip.loadAsync(await goodWorkbook());
  zip.file(part, change(await zip.file(part)!.async('string')));
  for (const [name, text] of Object.entries(more)) zip.file(name, text);
  return zip.generateAsync({ type: 'nodebuffer', compression: 'DEFLATE' });
}

const sheetPart = 'xl/worksheets/sheet1.xml';
const wholeSheet = 'A1:XFD1048576';
const bomb = `<?xml version="1.0"?><!DOCTYPE x [<!ENTITY a "aaaaaaaaaa">${'bcdefgh'
  .split('')
  .map((name, index) => `<!ENTITY ${name} "${`&${'abcdefg'[index]};`.repeat(10)}">`)
  .join('')}]>`;

export interface HostileFile {
  name: string;
  bytes: () => Promise<Buffer> | Buffer;
  /** What the sentence must say; null when the good rows may also be read. */
  says: RegExp | null;
}

/** Files H1 to H12, H19 to H21, H31 to H33 of the project's list, built here, none checked in. */
export const hostileFiles: Record<string, HostileFile> = {
  'H1 no bytes': { name: 'h1.xlsx', bytes: () => Buffer.alloc(0), says: /empty/ },
  'H2 one byte': { name: 'h2.xlsx', bytes: () => Buffer.from('P'), says: /not a workbook/ },
  'H3 CSV named xlsx': {
    name: 'h3.xlsx',
    bytes: () => Buffer.from('Client ID,Sampled\nEFF-1,2026-03-16\n'),
    says: /not a workbook/,
  },
  'H4 HTML table named xlsx': {
    name: 'h4.xlsx',
    bytes: () => Buffer.from('<html><table><tr><td>1</td></tr></table></html>'),
    says: /not a workbook/,
  },
  'H5 old format or password': {
    name: 'h5.xlsx',
    bytes: () => Buffer.concat([Buffer.from('d0cf11e0a1b11ae1', 'hex'), Buffer.alloc(4096)]),
    says: /old format or with a password/,
  },
  'H6 cut by one byte': {
    name: 'h6a.xlsx',
    bytes: async () => (await goodWorkbook()).subarray(0, -1),
    says: /could not be read|not a workbook|damaged/,
  },
  'H6 cut in half': {
    name: 'h6b.xlsx',
    bytes: async () => {
      const whole = await goodWorkbook();
      return whole.subarray(0, whole.length / 2);
    },
    says: /could not be read|not a workbook|damaged/,
  },
  'H8 zip without a workbook': {
    name: 'h8.xlsx',
    bytes: () => new JSZip().file('readme.txt', 'no').generateAsync({ type: 'nodebuffer' }),
    says: /workbook/,
  },
  'H9 workbook without its sheet part': {
    name: 'h9.xlsx',
    bytes: async () => {
      const zip = await JSZip.loadAsync(await goodWorkbook());
      zip.remove(sheetPart);
      return zip.generateAsync({ type: 'nodebuffer' });
    },
    says: /./,
  },
  'H10 a letter renamed': {
    name: 'h10.xlsx',
    bytes: () =>
      new JSZip()
        .file('[Content_Types].xml', '<Types/>')
        .file('word/document.xml', '<w:document/>')
        .generateAsync({ type: 'nodebuffer' }),
    says: /workbook/,
  },
  'H11 with a macro part': {
    name: 'h11.xlsx',
    bytes: () => withPart('xl/workbook.xml', (xml) => xml, { 'xl/vbaProject.bin': 'macro' }),
    says: /macros/,
  },
  'H12 script before the zip': {
    name: 'h12.xlsx',
    bytes: async () => Buffer.concat([Buffer.from('#!/bin/sh\nexit 1\n'), await goodWorkbook()]),
    says: /not a workbook/,
  },
  'H19 the whole sheet merged': {
    name: 'h19.xlsx',
    bytes: () =>
      withPart(sheetPart, (xml) =>
        xml.replace(
          '</sheetData>',
          `</sheetData><mergeCells count="1"><mergeCell ref="${wholeSheet}"/></mergeCells>`,
        ),
      ),
    says: null,
  },
  'H20 validation on the whole sheet': {
    name: 'h20.xlsx',
    bytes: () =>
      withPart(sheetPart, (xml) =>
        xml.replace(
          '</sheetData>',
          `</sheetData><dataValidations count="1"><dataValidation type="whole" sqref="${wholeSheet}"><formula1>1</formula1></dataValidation></dataValidations>`,
        ),
      ),
    says: null,
  },
  'H21 a name for the whole sheet': {
    name: 'h21.xlsx',
    bytes: () =>
      withPart('xl/workbook.xml', (xml) =>
        xml.replace(
          '</sheets>',
          `</sheets><definedNames><definedName name="all">Results!$A$1:$XFD$1048576</definedName></definedNames>`,
        ),
      ),
    says: null,
  },
  'H31 nested entities': {
    name: 'h31.xlsx',
    bytes: () => withPart(sheetPart, (xml) => bomb + xml.replace(/<\?xml[^>]*\?>/, '').replace('TSS', '&h;')),
    says: /./,
  },
  'H32 an entity of a local file': {
    name: 'h32.xlsx',
    bytes: () =>
      withPart(
        sheetPart,
        (xml) =>
          `<?xml version="1.0"?><!DOCTYPE x [<!ENTITY canary SYSTEM "file:///etc/hostname">]>${xml.replace(/<\?xml[^>]*\?>/, '').replace('</sheetData>', '<row r="9"><c r="A9" t="inlineStr"><is><t>&canary;</t></is></c></row></sheetData>')}`,
      ),
    says: /./,
  },
  'H33 a link to another workbook': {
    name: 'h33.xlsx',
    bytes: () =>
      withPart('xl/workbook.xml', (xml) => xml, { 'xl/externalLinks/externalLink1.xml': '<externalLink/>' }),
    says: /links to other workbooks/,
  },
};
