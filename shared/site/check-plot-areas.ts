import { Decimal } from 'decimal.js';

export type AreaCheck =
  | { kind: 'agrees' }
  | { kind: 'ask'; differencePercent: number; sentence: string }
  | { kind: 'refuse'; differencePercent: number; sentence: string };

/**
 * Live plots of a cell must add to its lined area: up to 1 % off asks for a reason, more is refused.
 * @param plotAreasM2 exact areas, m² @param linedAreaM2 m²
 * @source data dictionary, Plot and cover period
 */
export function checkPlotAreas(plotAreasM2: readonly string[], linedAreaM2: string): AreaCheck {
  const sum = plotAreasM2.reduce((total, area) => total.plus(area), new Decimal(0));
  const difference = sum.minus(linedAreaM2);
  if (difference.isZero()) return { kind: 'agrees' };
  const differencePercent = difference.div(linedAreaM2).times(100).toNumber();
  const signed = `${differencePercent > 0 ? '+' : '−'}${Math.abs(differencePercent).toFixed(1)} %`;
  const sentence = `The plots add to ${sum.toFixed()} m², the lined area is ${new Decimal(linedAreaM2).toFixed()} m² (${signed}).`;
  return Math.abs(differencePercent) <= 1
    ? { kind: 'ask', differencePercent, sentence: `${sentence} Say why, or correct an area.` }
    : {
        kind: 'refuse',
        differencePercent,
        sentence: `${sentence} Correct the areas: more than 1 % cannot be kept.`,
      };
}
