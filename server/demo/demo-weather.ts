import { addDays, daysBetween, dayOfYear, monthOfDay, type Day } from '#shared/calendar/day.ts';
import type { Random } from './random.ts';

export interface DemoWeatherDay {
  day: Day;
  rainMm: number;
  tMinC: number;
  tMaxC: number;
}

/**
 * Invented daily weather of a cool, wet place: about 950 mm a year, winter wetter than summer.
 * @param wetMonth a month with nearly twice its rain, for the story of the pond
 */
export function generateWeather(random: Random, first: Day, last: Day, wetMonth: string): DemoWeatherDay[] {
  const days: DemoWeatherDay[] = [];
  let wasWet = false;
  for (let index = 0; index <= daysBetween(first, last); index += 1) {
    const day = addDays(first, index);
    const season = Math.cos((2 * Math.PI * (dayOfYear(day) - 20)) / 365);
    const wetChance: number = (wasWet ? 0.62 : 0.34) + 0.08 * season;
    wasWet = random.next() < wetChance;
    const size = -Math.log(1 - random.next()) * (5.4 + 1.1 * season);
    const factor = monthOfDay(day) === wetMonth ? 1.9 : 1;
    const meanC = 9.6 - 6.4 * season + random.normal(0, 2.2);
    const range = random.between(4, 10);
    const round = (value: number) => Math.round(value * 10) / 10;
    days.push({
      day,
      rainMm: wasWet ? round(Math.max(0.2, size) * factor) : 0,
      tMinC: round(meanC - range / 2),
      tMaxC: round(meanC + range / 2),
    });
  }
  return days;
}
