import { seriesLooks, type Series } from '#shared/charts/series.ts';

export interface NativeSeries {
  series: Series;
  name: string;
  /** Range of the values, such as `Compare!$B$20:$B$31`. */
  range: string;
  values: readonly (number | null)[];
}

export interface NativeChart {
  sheet: string;
  kind: 'line' | 'bar';
  title: string;
  /** What the chart shows, for a reader who cannot see it. */
  description: string;
  axisTitle: string;
  /** Words, or months as the day numbers of the workbook. */
  categories:
    { range: string; texts: readonly string[] } | { range: string; monthNumbers: readonly number[] };
  lines: readonly NativeSeries[];
  /** Cells the chart covers: columns and rows from 0. */
  anchor: { fromColumn: number; fromRow: number; toColumn: number; toRow: number };
}

export const escapeXml = (text: string): string =>
  text.replace(/[<>&"']/g, (mark) => `&#${mark.charCodeAt(0)};`);

const dashes: Partial<Record<Series, string>> = {
  predicted: 'dash',
  evapotranspiration: 'sysDot',
  runoff: 'lgDash',
  storage: 'lgDashDot',
};
const marks: Partial<Record<Series, string>> = {
  predicted: 'square',
  pumped: 'circle',
  effluent: 'square',
  storage: 'diamond',
};

const cache = (values: readonly (number | null)[], format = 'General') =>
  `<c:numCache><c:formatCode>${format}</c:formatCode><c:ptCount val="${values.length}"/>${values.map((value, index) => (value === null ? '' : `<c:pt idx="${index}"><c:v>${value}</c:v></c:pt>`)).join('')}</c:numCache>`;
const texts = (words: readonly string[]) =>
  `<c:strCache><c:ptCount val="${words.length}"/>${words.map((word, index) => `<c:pt idx="${index}"><c:v>${escapeXml(word)}</c:v></c:pt>`).join('')}</c:strCache>`;
const rich = (text: string) =>
  `<c:title><c:tx><c:rich><a:bodyPr/><a:p><a:r><a:rPr lang="en-GB" sz="1000" b="0"/><a:t>${escapeXml(text)}</a:t></a:r></a:p></c:rich></c:tx><c:overlay val="0"/></c:title>`;
const colour = (hex: string) => `<a:solidFill><a:srgbClr val="${hex.slice(1).toUpperCase()}"/></a:solidFill>`;

const categoryXml = ({ categories }: NativeChart) =>
  'texts' in categories
    ? `<c:strRef><c:f>${escapeXml(categories.range)}</c:f>${texts(categories.texts)}</c:strRef>`
    : `<c:numRef><c:f>${escapeXml(categories.range)}</c:f>${cache(categories.monthNumbers, 'mmm yyyy')}</c:numRef>`;

function seriesXml(chart: NativeChart, line: NativeSeries, index: number): string {
  const { kind } = chart;
  const { colour: hex } = seriesLooks[line.series];
  const isHollow = line.series === 'predicted';
  const stroke = `<a:ln w="22225">${colour(hex)}<a:prstDash val="${dashes[line.series] ?? 'solid'}"/></a:ln>`;
  const look =
    kind === 'bar'
      ? `<c:spPr>${colour(hex)}</c:spPr><c:invertIfNegative val="0"/>`
      : `<c:spPr>${stroke}</c:spPr><c:marker><c:symbol val="${marks[line.series] ?? 'none'}"/><c:size val="6"/><c:spPr>${colour(isHollow ? '#ffffff' : hex)}<a:ln w="15875">${colour(hex)}</a:ln></c:spPr></c:marker>`;
  return `<c:ser><c:idx val="${index}"/><c:order val="${index}"/><c:tx><c:v>${escapeXml(line.name)}</c:v></c:tx>${look}<c:cat>${categoryXml(chart)}</c:cat><c:val><c:numRef><c:f>${escapeXml(line.range)}</c:f>${cache(line.values)}</c:numRef></c:val>${kind === 'line' ? '<c:smooth val="0"/>' : ''}</c:ser>`;
}

/** Chart part of a workbook after ISO/IEC 29500-4: the cached numbers make previewers draw it, the ranges keep it live. */
export function nativeChartXml(chart: NativeChart): string {
  const inside = chart.lines.map((line, index) => seriesXml(chart, line, index)).join('');
  const plot =
    chart.kind === 'line'
      ? `<c:lineChart><c:grouping val="standard"/><c:varyColors val="0"/>${inside}<c:marker val="1"/><c:axId val="1"/><c:axId val="2"/></c:lineChart>`
      : `<c:barChart><c:barDir val="bar"/><c:grouping val="clustered"/><c:varyColors val="0"/>${inside}<c:gapWidth val="60"/><c:axId val="1"/><c:axId val="2"/></c:barChart>`;
  const [categorySide, valueSide] = chart.kind === 'line' ? ['b', 'l'] : ['l', 'b'];
  return `<?xml version="1.0" encoding="UTF-8" standalone="yes"?><c:chartSpace xmlns:c="http://schemas.openxmlformats.org/drawingml/2006/chart" xmlns:a="http://schemas.openxmlformats.org/drawingml/2006/main" xmlns:r="http://schemas.openxmlformats.org/officeDocument/2006/relationships"><c:roundedCorners val="0"/><c:chart>${rich(chart.title)}<c:autoTitleDeleted val="0"/><c:plotArea><c:layout/>${plot}<c:catAx><c:axId val="1"/><c:scaling><c:orientation val="${chart.kind === 'bar' ? 'maxMin' : 'minMax'}"/></c:scaling><c:delete val="0"/><c:axPos val="${categorySide}"/><c:numFmt formatCode="General" sourceLinked="1"/><c:majorTickMark val="none"/><c:minorTickMark val="none"/><c:tickLblPos val="low"/><c:crossAx val="2"/><c:crosses val="autoZero"/><c:auto val="0"/></c:catAx><c:valAx><c:axId val="2"/><c:scaling><c:orientation val="minMax"/><c:min val="0"/></c:scaling><c:delete val="0"/><c:axPos val="${valueSide}"/><c:majorGridlines><c:spPr><a:ln w="6350">${colour('#c8c5d2')}</a:ln></c:spPr></c:majorGridlines>${rich(chart.axisTitle)}<c:numFmt formatCode="General" sourceLinked="0"/><c:majorTickMark val="none"/><c:minorTickMark val="none"/><c:tickLblPos val="nextTo"/><c:crossAx val="1"/><c:crosses val="${chart.kind === 'bar' ? 'max' : 'autoZero'}"/></c:valAx></c:plotArea>${chart.lines.length > 1 ? '<c:legend><c:legendPos val="t"/><c:overlay val="0"/></c:legend>' : ''}<c:plotVisOnly val="1"/><c:dispBlanksAs val="gap"/></c:chart></c:chartSpace>`;
}
