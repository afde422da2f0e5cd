import { addDays, firstDay, monthOfDay, weekday, type Day } from '#shared/calendar/day.ts';
import { addMonths, quarterMonths, quarterOf, type Month } from '#shared/calendar/month.ts';

/** The dates of the demo's story, all from the day it is loaded. */
export interface DemoPlan {
  today: Day;
  anchor: Month;
  firstMonth: Month;
  start: Day;
  issuedQuarter: string;
  wetMonth: Month;
  swapDay: Day;
  stuckFrom: Day;
  weekend: { saturday: Day; sunday: Day };
  leakFrom: Day;
  exceedanceDay: Day;
  flipMonth: Month;
  doubledTicketDay: Day;
}

const dayOf = (month: Month, day: number): Day => `${month}-${String(day).padStart(2, '0')}`;

/** Last day before a day that falls on the weekday. */
function lastWeekday(before: Day, name: string): Day {
  let day = addDays(before, -1);
  while (weekday(day) !== name) day = addDays(day, -1);
  return day;
}

/** Two full years plus the running quarter, with the story set into them. */
export function planDemo(today: Day): DemoPlan {
  const anchor = monthOfDay(today);
  const quarterStart = quarterMonths(quarterOf(anchor))[0]!;
  const firstMonth = addMonths(quarterStart, -24);
  const signedOn = addDays(firstDay(quarterStart), 25);
  const issuedQuarter = quarterOf(addMonths(quarterStart, today > addDays(signedOn, 14) ? -3 : -6));
  const previous = addMonths(anchor, -1);
  const saturday = lastWeekday(dayOf(previous, 20), 'Saturday');
  return {
    today,
    anchor,
    firstMonth,
    start: firstDay(firstMonth),
    issuedQuarter,
    wetMonth: addMonths(anchor, -2),
    swapDay: dayOf(addMonths(anchor, -7), 3),
    stuckFrom: dayOf(addMonths(anchor, -4), 18),
    weekend: { saturday, sunday: addDays(saturday, 1) },
    leakFrom: dayOf(previous, 9),
    exceedanceDay: lastWeekday(today, 'Tuesday'),
    flipMonth: previous,
    doubledTicketDay: dayOf(addMonths(anchor, -2), 19),
  };
}
