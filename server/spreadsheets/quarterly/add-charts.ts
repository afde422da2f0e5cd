import JSZip from 'jszip';
import { escapeXml, nativeChartXml, type NativeChart } from './native-chart.ts';

const relationships = 'http://schemas.openxmlformats.org/officeDocument/2006/relationships';
const packageRelationships = 'http://schemas.openxmlformats.org/package/2006/relationships';
const head = '<?xml version="1.0" encoding="UTF-8" standalone="yes"?>';

const point = (name: 'from' | 'to', column: number, row: number) =>
  `<xdr:${name}><xdr:col>${column}</xdr:col><xdr:colOff>0</xdr:colOff><xdr:row>${row}</xdr:row><xdr:rowOff>0</xdr:rowOff></xdr:${name}>`;

/** Drawing that places one chart between two cells, with its description as alternative text. */
const drawingXml = ({ anchor, title, description }: NativeChart) =>
  `${head}<xdr:wsDr xmlns:xdr="http://schemas.openxmlformats.org/drawingml/2006/spreadsheetDrawing" xmlns:a="http://schemas.openxmlformats.org/drawingml/2006/main"><xdr:twoCellAnchor>${point('from', anchor.fromColumn, anchor.fromRow)}${point('to', anchor.toColumn, anchor.toRow)}<xdr:graphicFrame macro=""><xdr:nvGraphicFramePr><xdr:cNvPr id="2" name="${escapeXml(title)}" descr="${escapeXml(description)}"/><xdr:cNvGraphicFramePr/></xdr:nvGraphicFramePr><xdr:xfrm><a:off x="0" y="0"/><a:ext cx="0" cy="0"/></xdr:xfrm><a:graphic><a:graphicData uri="http://schemas.openxmlformats.org/drawingml/2006/chart"><c:chart xmlns:c="http://schemas.openxmlformats.org/drawingml/2006/chart" xmlns:r="${relationships}" r:id="rId1"/></a:graphicData></a:graphic></xdr:graphicFrame><xdr:clientData/></xdr:twoCellAnchor></xdr:wsDr>`;

/** Part of a sheet by its name, through the workbook's own relationships. */
async function sheetPart(zip: JSZip, name: string): Promise<string> {
  const workbook = await zip.file('xl/workbook.xml')!.async('string');
  const rels = await zip.file('xl/_rels/workbook.xml.rels')!.async('string');
  const id = new RegExp(`<sheet [^>]*name="${escapeXml(name)}"[^>]*r:id="([^"]+)"`).exec(workbook)?.[1];
  const target = rels.match(/<Relationship [^>]*>/g)?.find((one) => one.includes(`Id="${id}"`));
  const path = /Target="\/?(?:xl\/)?([^"]+)"/.exec(target ?? '')?.[1];
  if (!path) throw new RangeError(`The workbook has no sheet ${name}.`);
  return `xl/${path}`;
}

/** Writes a part without an entry for its folder: a workbook has none. */
const put = (zip: JSZip, part: string, text: string) => zip.file(part, text, { createFolders: false });

async function addChart(zip: JSZip, chart: NativeChart, number: number): Promise<void> {
  const part = await sheetPart(zip, chart.sheet);
  const relsPart = part.replace(/worksheets\/(.+)$/, 'worksheets/_rels/$1.rels');
  const rels =
    (await zip.file(relsPart)?.async('string')) ??
    `${head}<Relationships xmlns="${packageRelationships}"></Relationships>`;
  put(
    zip,
    relsPart,
    rels.replace(
      '</Relationships>',
      `<Relationship Id="rIdChart" Type="${relationships}/drawing" Target="../drawings/chart-drawing${number}.xml"/></Relationships>`,
    ),
  );
  const sheet = await zip.file(part)!.async('string');
  const withNamespace = sheet.includes('xmlns:r=')
    ? sheet
    : sheet.replace('<worksheet ', `<worksheet xmlns:r="${relationships}" `);
  put(zip, part, withNamespace.replace('</worksheet>', '<drawing r:id="rIdChart"/></worksheet>'));
  put(zip, `xl/drawings/chart-drawing${number}.xml`, drawingXml(chart));
  put(
    zip,
    `xl/drawings/_rels/chart-drawing${number}.xml.rels`,
    `${head}<Relationships xmlns="${packageRelationships}"><Relationship Id="rId1" Type="${relationships}/chart" Target="../charts/chart${number}.xml"/></Relationships>`,
  );
  put(zip, `xl/charts/chart${number}.xml`, nativeChartXml(chart));
}

/**
 * Last step of a workbook: native charts and alternative texts, which exceljs cannot write and would drop.
 * @param pictures alternative text of each picture, in the order they were placed
 */
export async function addCharts(
  bytes: Buffer,
  charts: readonly NativeChart[],
  pictures: readonly string[],
): Promise<Buffer> {
  const zip = await JSZip.loadAsync(bytes);
  for (const [index, chart] of charts.entries()) await addChart(zip, chart, index + 1);
  const types = await zip.file('[Content_Types].xml')!.async('string');
  const overrides = charts
    .map(
      (_, index) =>
        `<Override PartName="/xl/drawings/chart-drawing${index + 1}.xml" ContentType="application/vnd.openxmlformats-officedocument.drawing+xml"/><Override PartName="/xl/charts/chart${index + 1}.xml" ContentType="application/vnd.openxmlformats-officedocument.drawingml.chart+xml"/>`,
    )
    .join('');
  put(zip, '[Content_Types].xml', types.replace('</Types>', `${overrides}</Types>`));
  for (const [index, description] of pictures.entries()) {
    const part = `xl/drawings/drawing${index + 1}.xml`;
    const drawing = await zip.file(part)!.async('string');
    put(
      zip,
      part,
      drawing.replace(/<xdr:cNvPr ([^>]*?)(\/?)>/, `<xdr:cNvPr $1 descr="${escapeXml(description)}"$2>`),
    );
  }
  return zip.generateAsync({ type: 'nodebuffer', compression: 'DEFLATE' });
}
