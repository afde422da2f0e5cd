import { levenbergMarquardt } from 'ml-levenberg-marquardt';
import { counted } from '../count-words.ts';
import { fitStatistics, type FitStatistics } from '../reconciliation/fit-statistics.ts';
import { calibratedRegister, type CalibratedName } from './calibrated-parameters.ts';
import { pairsNotToldApart, sensitivityOf } from './identifiability.ts';

export interface CalibrationChoice {
  name: CalibratedName;
  low: number;
  high: number;
}

export interface CalibratedValue extends CalibrationChoice {
  before: number;
  after: number;
  isAtBound: boolean;
  /** Largest change of a month's prediction over the whole range, as a share of the mean measured month. */
  reach: number;
}

export interface CalibrationPart {
  monthCount: number;
  before: FitStatistics;
  after: FitStatistics;
}

export interface Calibration {
  values: CalibratedValue[];
  fitted: CalibrationPart;
  heldBack: CalibrationPart;
  /** Pairs of parameters whose effects cannot be told apart on these months, with their correlation. */
  notToldApart: { a: CalibratedName; b: CalibratedName; correlation: number }[];
  /** Sentences why the result should not be trusted yet; empty when nothing speaks against it. */
  doubts: string[];
  iterations: number;
}

/** The last quarter of the months is held back as a test. */
const heldBackShare = 0.25;
const monthsMin = 8;
/** @assumed our choices: what counts as at a bound, as without effect, as a short record */
const boundTolerance = 0.005;
const reachMin = 0.02;
const monthsForTrust = 36;
const biasMaxPercent = 5;
const iterationsMax = 200;

/** Too few months with both sides; its name survives the way back from a worker thread. */
export class TooFewMonths extends Error {
  override name = 'TooFewMonths';
}

function doubtsOf(result: Omit<Calibration, 'doubts'>, isDivided: boolean): string[] {
  const { values, fitted, heldBack, notToldApart, iterations } = result;
  const label = (name: CalibratedName) => calibratedRegister[name].label.toLowerCase();
  const doubts: string[] = [];
  const months = fitted.monthCount + heldBack.monthCount;
  if (months < monthsForTrust)
    doubts.push(
      `Only ${counted(months, 'month', 'months')} were measured. Fewer than three years rarely show a wet and a dry one.`,
    );
  const rmse = { before: heldBack.before.rmse ?? 0, after: heldBack.after.rmse ?? 0 };
  if (rmse.after > rmse.before)
    doubts.push(
      `The held-back months fit worse after it than before: RMSE ${rmse.after.toFixed(0)} m³ against ${rmse.before.toFixed(0)}.`,
    );
  const bias = heldBack.after.pbiasPercent ?? 0;
  if (Math.abs(bias) > biasMaxPercent)
    doubts.push(
      `After it the model is ${Math.abs(bias).toFixed(1)} % too ${bias > 0 ? 'high' : 'low'} on the held-back months.`,
    );
  if (iterations >= iterationsMax)
    doubts.push(`The fit stopped after ${iterationsMax} steps without settling.`);
  for (const value of values.filter((one) => one.isAtBound))
    doubts.push(
      `The ${label(value.name)} ran into its bound of ${value.after === value.low ? value.low : value.high}.`,
    );
  for (const value of values.filter((one) => one.reach < reachMin))
    doubts.push(`These months say next to nothing about the ${label(value.name)}.`);
  for (const pair of notToldApart)
    doubts.push(
      `The ${label(pair.a)} and the ${label(pair.b)} cannot be told apart on these months (correlation ${pair.correlation.toFixed(2).replace('-', '−')}): other values of the two fit as well.`,
    );
  if (isDivided)
    doubts.push(
      'Part of what was measured is a shared header divided by the prediction: it agrees by construction.',
    );
  return doubts;
}

/**
 * Fits parameters to measured months within bounds, holds the last quarter back, and says what speaks against the result.
 * Nothing is applied: the values are a proposal.
 * @param choices parameters with bounds @param start their values now
 * @param measuredM3 by month, in order @param predict predicted volumes of the same months for given values, m³
 * @throws TooFewMonths with a sentence
 * @source Levenberg–Marquardt by ml-levenberg-marquardt; method section 10
 */
export function calibrate(
  choices: readonly CalibrationChoice[],
  start: readonly number[],
  measuredM3: readonly number[],
  predict: (values: readonly number[]) => readonly number[],
  isDivided: boolean,
): Calibration {
  if (measuredM3.length < monthsMin)
    throw new TooFewMonths(
      `Only ${counted(measuredM3.length, 'month has', 'months have')} both sides; a calibration needs at least ${monthsMin}.`,
    );
  const fitCount = measuredM3.length - Math.max(1, Math.floor(measuredM3.length * heldBackShare));
  // Every parameter runs from 0 at its lower bound to 1 at its upper one, so that all steps are of one size.
  const valuesAt = (shares: readonly number[]) =>
    choices.map(({ low, high }, index) => low + (high - low) * shares[index]!);
  const sharesOf = (values: readonly number[]) =>
    choices.map(({ low, high }, index) => Math.min(1, Math.max(0, (values[index]! - low) / (high - low))));
  const scaleM3 = measuredM3.reduce((sum, one) => sum + Math.abs(one), 0) / measuredM3.length || 1;
  const x = Array.from({ length: fitCount }, (_, index) => index);
  const found = levenbergMarquardt(
    { x, y: measuredM3.slice(0, fitCount).map((one) => one / scaleM3) },
    (shares) => {
      const predicted = predict(valuesAt(shares));
      return (index) => predicted[index]! / scaleM3;
    },
    {
      initialValues: sharesOf(start).map((share) => Math.min(0.99, Math.max(0.01, share))),
      minValues: choices.map(() => 0),
      maxValues: choices.map(() => 1),
      gradientDifference: 1e-3,
      centralDifference: true,
      damping: 0.1,
      maxIterations: iterationsMax,
      errorTolerance: 1e-8,
      improvementThreshold: 1e-6,
    },
  );
  const after = valuesAt(found.parameterValues);
  const [predictedBefore, predictedAfter] = [predict(start), predict(after)];
  const part = (from: number, to: number): CalibrationPart => {
    const fit = (predicted: readonly number[]) =>
      fitStatistics(
        measuredM3
          .slice(from, to)
          .map((measured, index) => ({ measured, predicted: predicted[from + index]! })),
      );
    return { monthCount: to - from, before: fit(predictedBefore), after: fit(predictedAfter) };
  };
  const at = (shares: readonly number[]) =>
    predict(valuesAt(shares))
      .slice(0, fitCount)
      .map((one) => one / scaleM3);
  const sensitivity = sensitivityOf(at, found.parameterValues);
  const result = {
    values: choices.map((choice, index) => ({
      ...choice,
      before: start[index]!,
      after: after[index]!,
      isAtBound: Math.min(found.parameterValues[index]!, 1 - found.parameterValues[index]!) < boundTolerance,
      reach: sensitivity.reach[index]!,
    })),
    fitted: part(0, fitCount),
    heldBack: part(fitCount, measuredM3.length),
    notToldApart: pairsNotToldApart(sensitivity.jacobian).map(({ a, b, correlation }) => ({
      a: choices[a]!.name,
      b: choices[b]!.name,
      correlation,
    })),
    iterations: found.iterations,
  };
  return { ...result, doubts: doubtsOf(result, isDivided) };
}
