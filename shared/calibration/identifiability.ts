import { Matrix, pseudoInverse } from 'ml-matrix';

/** @assumed our choice: from here on two parameters count as not told apart */
const correlationMax = 0.95;
const stepShare = 0.01;

/**
 * How the predictions answer to each parameter around a point of the unit box.
 * @param at predictions, scaled, at shares between 0 and 1 of the bounds
 * @returns Jacobian, months × parameters, and the largest change of a month over the whole range of each
 */
export function sensitivityOf(
  at: (shares: readonly number[]) => readonly number[],
  point: readonly number[],
): { jacobian: number[][]; reach: number[] } {
  const columns = point.map((share, index) => {
    const move = (to: number) => at(point.map((one, other) => (other === index ? to : one)));
    const [low, high] = [Math.max(0, share - stepShare), Math.min(1, share + stepShare)];
    const [below, above] = [move(low), move(high)];
    return above.map((value, month) => (value - below[month]!) / (high - low));
  });
  const reach = point.map((_share, index) => {
    const move = (to: number) => at(point.map((one, other) => (other === index ? to : one)));
    const [low, high] = [move(0), move(1)];
    return Math.max(...high.map((value, month) => Math.abs(value - low[month]!)));
  });
  return { jacobian: columns[0]!.map((_value, month) => columns.map((column) => column[month]!)), reach };
}

/**
 * Pairs of parameters whose estimates are correlated beyond telling apart: from (JᵀJ)⁻¹, scaled to unit diagonal.
 * A parameter without any effect is in no pair; it is said by itself.
 * @source standard linear theory of least squares (covariance of the estimates)
 */
export function pairsNotToldApart(
  jacobian: readonly (readonly number[])[],
): { a: number; b: number; correlation: number }[] {
  const parameterCount = jacobian[0]?.length ?? 0;
  const norms = Array.from({ length: parameterCount }, (_, column) =>
    Math.hypot(...jacobian.map((row) => row[column]!)),
  );
  const active = norms.flatMap((norm, column) => (norm > 1e-6 ? [column] : []));
  if (active.length < 2) return [];
  const scaled = new Matrix(jacobian.map((row) => active.map((column) => row[column]! / norms[column]!)));
  const covariance = pseudoInverse(scaled.transpose().mmul(scaled));
  const pairs: { a: number; b: number; correlation: number }[] = [];
  active.forEach((a, i) =>
    active.slice(i + 1).forEach((b, offset) => {
      const j = i + 1 + offset;
      const correlation = covariance.get(i, j) / Math.sqrt(covariance.get(i, i) * covariance.get(j, j));
      // Columns that point the same way make JᵀJ singular; their cosine says it where the inverse cannot.
      const cosine = scaled.getColumn(i).reduce((sum, one, row) => sum + one * scaled.get(row, j), 0);
      if (Math.abs(cosine) > 0.999) pairs.push({ a, b, correlation: -Math.sign(cosine) });
      else if (Math.abs(correlation) > correlationMax) pairs.push({ a, b, correlation });
    }),
  );
  return pairs;
}
