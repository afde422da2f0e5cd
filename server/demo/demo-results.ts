import { addDays, monthDays, weekday, type Day } from '#shared/calendar/day.ts';
import { monthRange, type Month } from '#shared/calendar/month.ts';
import type { DemoPlan } from './demo-plan.ts';
import type { Random } from './random.ts';

export interface DemoResult {
  month: Month;
  day: Day;
  point: 'EFF-1' | 'RAW-C2' | 'RAW-C3';
  analyte: string;
  /** As the laboratory writes it. */
  text: string;
  unit: string;
  limit: string;
}

const daysOf = (month: Month, name: string, before: Day): Day[] =>
  monthDays(month).filter((day) => weekday(day) === name && day < before);

/** Results of the effluent each Tuesday and of raw leachate four times a year, with the story's values set in. */
export function generateResults(random: Random, plan: DemoPlan): DemoResult[] {
  const results: DemoResult[] = [];
  const text = (value: number, decimals: number) => Math.max(0, value).toFixed(decimals);
  for (const month of monthRange(plan.firstMonth, plan.anchor)) {
    const tuesdays = daysOf(month, 'Tuesday', plan.today);
    tuesdays.forEach((day, index) => {
      const add = (analyte: string, value: string, unit: string, limit: string) =>
        results.push({ month, day, point: 'EFF-1', analyte, text: value, unit, limit });
      const isFlip = month === plan.flipMonth;
      const ammonia =
        day === plan.exceedanceDay
          ? '10.4'
          : random.next() < 0.2
            ? '<0.5'
            : text(random.between(1.4, 5.2), 1);
      const zinc =
        isFlip && index < 4
          ? ['0.18', '<0.10', '<0.10', '0.12'][index]!
          : random.next() < 0.35
            ? '<0.05'
            : text(random.between(0.04, 0.1), 3);
      add('pH', text(random.normal(7.5, 0.12), 1), 'pH', '');
      add('BOD5', random.next() < 0.3 ? '<4' : text(random.between(4, 14), 0), 'mg/L', '4');
      add('TSS', text(random.between(7, 21), 0), 'mg/L', '2');
      add('Ammonia (as N)', ammonia, 'mg/L', '0.5');
      add('Zinc, Total', zinc, 'mg/L', isFlip ? '0.10' : '0.05');
      if (index === 0) {
        add(
          'Phenol',
          random.next() < 0.6 ? '<0.005' : text(random.between(0.005, 0.011), 4),
          'mg/L',
          '0.005',
        );
        add(
          'α-Terpineol',
          month === plan.flipMonth ? '<0.05' : '<0.010',
          'mg/L',
          month === plan.flipMonth ? '0.05' : '0.010',
        );
        add('Chloride', text(random.normal(1400, 90), 0), 'mg/L', '10');
      }
    });
    const first = tuesdays[0];
    if (first && ['02', '05', '08', '11'].includes(month.slice(5))) {
      const raw = (
        point: DemoResult['point'],
        analyte: string,
        value: number,
        decimals: number,
        unit = 'mg/L',
      ) =>
        results.push({
          month,
          day: addDays(first, 0),
          point,
          analyte,
          text: text(value, decimals),
          unit,
          limit: '',
        });
      for (const [point, cod, bod, ammonia, chloride, ph] of [
        ['RAW-C2', 1900, 210, 690, 1300, 7.6],
        ['RAW-C3', 9200, 5900, 760, 1800, 6.8],
      ] as const) {
        raw(point, 'COD', random.normal(cod, cod * 0.08), 0);
        raw(point, 'BOD5', random.normal(bod, bod * 0.1), 0);
        raw(point, 'Ammonia (as N)', random.normal(ammonia, 35), 0);
        raw(point, 'Chloride', random.normal(chloride, 80), 0);
        raw(point, 'pH', random.normal(ph, 0.1), 1, 'pH');
      }
    }
  }
  return results;
}

/** A month's results as the laboratory's sheet: letterhead, table, footnote. */
export function resultsSheet(results: readonly DemoResult[], month: Month, revision: number): string {
  const quote = (value: string) => (/[",\n]/.test(value) ? `"${value.replaceAll('"', '""')}"` : value);
  const rows = results.map((one) =>
    [one.point, one.day, one.analyte, one.text, one.unit, one.limit, one.limit ? 'mg/L' : '']
      .map(quote)
      .join(','),
  );
  const head = [
    'Pellam Laboratory (invented),,,,,,',
    `Project: Varrow Hill ${month},,Job: ${month.slice(2, 4)}-${month.slice(5)}07,,Revision: ${revision},,`,
    ',,,,,,',
    'Client ID,Sampled,Parameter,Result,Units,RL,RL Units',
  ];
  return [...head, ...rows, ',,,,,,', 'U = not detected at RL; J = estimated below RL,,,,,,'].join('\n');
}
