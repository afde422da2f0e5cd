/** One line of the table: a figure beside the bare equivalent measured in the same run. */
export interface Figure {
  what: string;
  value: number;
  unit: string;
  bare: string;
  bareValue: number;
}

export const quantile = (values: readonly number[], share: number): number =>
  [...values].sort((a, b) => a - b)[Math.min(values.length - 1, Math.floor(values.length * share))]!;
export const median = (values: readonly number[]): number => quantile(values, 0.5);

/** Milliseconds of each of a number of runs, after one that warms up. */
export async function timesMs(runs: number, work: (run: number) => unknown): Promise<number[]> {
  await work(-1);
  const times: number[] = [];
  for (let run = 0; run < runs; run += 1) {
    const start = performance.now();
    await work(run);
    times.push(performance.now() - start);
  }
  return times;
}

const digits = (value: number) =>
  value >= 100 ? value.toFixed(0) : value >= 10 ? value.toFixed(1) : value.toFixed(2);

export function printTable(title: string, figures: readonly Figure[]): void {
  console.log(
    `\n${title}\n\n| What | Tallyweir | Bare equivalent | Bare | Ratio |\n|---|---:|---|---:|---:|`,
  );
  for (const one of figures)
    console.log(
      `| ${one.what} | ${digits(one.value)} ${one.unit} | ${one.bare} | ${digits(one.bareValue)} ${one.unit} | ${(one.value / one.bareValue).toFixed(1)} |`,
    );
}
