import { counted } from '#shared/count-words.ts';
import { dayName } from '#shared/calendar/day.ts';
import type { ReportView } from '#shared/views/lab-view.ts';

export const counts = (view: ReportView) => ({
  stops: view.readiness.filter((line) => line.state === 'stops').length,
  ask: view.readiness.filter((line) => line.state === 'ask').length,
});

export function stateSentence(view: ReportView): string {
  const { stops, ask } = counts(view);
  const last = view.issues.filter((one) => one.quarter === view.quarter).at(-1);
  if (last)
    return last.isStale
      ? `Issue ${last.issue} was signed on ${dayName(last.signedAt.slice(0, 10))}; ${counted(view.changes.length, 'number has', 'numbers have')} changed since.`
      : `Issue ${last.issue} was signed on ${dayName(last.signedAt.slice(0, 10))} and says what the record says.`;
  return `${stops ? `${stops} ${stops === 1 ? 'thing stops' : 'things stop'} the signature` : 'Nothing stops the signature'}${ask ? `, ${ask} ${ask === 1 ? 'is' : 'are'} worth asking about` : ''}. ${view.due}`;
}
