import { firstDay, lastDay } from '#shared/calendar/day.ts';
import type { Month } from '#shared/calendar/month.ts';
import { notReadReasonNames } from '#shared/schemas/readings.ts';
import type { Transaction } from '../../db/transaction.ts';
import { listSiteClimate } from '../climate/climate-service.ts';
import { listNotes } from '../compare/compare-service.ts';
import { listClocks, listExceedances } from '../limits/limit-repository.ts';
import * as entryRepository from '../ledger/entry-repository.ts';
import { listAdjustments, listNotRead } from '../readings/reading-repository.ts';
import type { SiteRecord } from '../sites/site-service.ts';
import type { Quarter } from './quarter.ts';

export async function notesOf(
  tx: Transaction,
  record: SiteRecord,
  months: Month[],
): Promise<Quarter['notes']> {
  const [first, last] = [firstDay(months[0]!), lastDay(months.at(-1)!)];
  const notes: Quarter['notes'] = [];
  for (const row of await listNotRead(tx, record.site.id, first, last)) {
    const point = record.roundPoints.find((one) => one.id === row.roundPointId);
    const name =
      record.meters.find((one) => one.id === point?.subjectId)?.name ??
      record.stores.find((one) => one.id === point?.subjectId)?.code ??
      'Round point';
    notes.push({
      when: row.siteDay,
      subject: name,
      sentence:
        `Not read: ${notReadReasonNames[row.reasonCode as 'frozen'].toLowerCase()}. ${row.note ?? ''}`.trim(),
    });
  }
  const adjustments = record.meters.length
    ? await listAdjustments(
        tx,
        record.meters.map((meter) => meter.id),
      )
    : [];
  for (const row of adjustments.filter(
    (one) => one.fromAt.slice(0, 10) <= last && one.toAt.slice(0, 10) >= first,
  )) {
    const code = record.meters.find((one) => one.id === row.meterId)!.code;
    notes.push({
      when: row.fromAt.slice(0, 10),
      subject: `Meter ${code}`,
      sentence: `Estimate of ${Number(row.volumeM3)} m³: ${(row.inputs as { text?: string } | null)?.text ?? row.method ?? ''}. ${row.reason ?? ''}`,
    });
  }
  for (const row of record.meterEvents.filter((one) => one.siteDay >= first && one.siteDay <= last)) {
    notes.push({
      when: row.siteDay,
      subject: `Meter ${record.meters.find((one) => one.id === row.meterId)!.code}`,
      sentence: `${row.kind.replace('-', ' ')}: ${row.registerBefore ?? ''} → ${row.registerAfter ?? ''} ${row.note ?? ''}`,
    });
  }
  for (const row of (await listSiteClimate(tx, record.site.id)).filter(
    (one) => months.includes(one.month) && !one.isComplete,
  )) {
    notes.push({
      when: row.month,
      subject: 'Climate',
      sentence: `${row.rainDayCount} of ${row.dayCount} days with rain, ${row.temperatureDayCount} with temperature. Choice: ${row.choice ?? 'none yet'}.`,
    });
  }
  for (const row of (await listNotes(tx, record.site.id)).filter((one) => months.includes(one.month))) {
    notes.push({
      when: row.month,
      subject: `Cell ${record.cells.find((one) => one.id === row.cellId)?.code ?? ''}`,
      sentence: `${row.state}: ${row.cause}. ${row.note}`,
    });
  }
  const exceedances = (await listExceedances(tx, record.site.id)).filter((one) => months.includes(one.month));
  const clocks = await listClocks(
    tx,
    exceedances.map((one) => one.id),
  );
  for (const row of exceedances) {
    const steps = clocks
      .filter((clock) => clock.exceedanceId === row.id)
      .map(
        (clock) =>
          `${clock.step}: ${clock.doneAt ? `done, ${clock.doneNote ?? ''}` : `due ${clock.dueAt.slice(0, 10)}`}`,
      );
    notes.push({
      when: row.periodKey,
      subject: 'Exceedance',
      sentence: [row.sentence, ...steps, row.closedAt ? `Closed: ${row.cause ?? ''}` : 'Open.'].join(' '),
    });
  }
  for (const row of (await entryRepository.listPendingChanges(tx, record.site.id)).filter((one) =>
    months.includes(one.month),
  ))
    notes.push({ when: row.month, subject: 'Waiting', sentence: row.sentence });
  notes.push({
    when: last,
    subject: 'Liquid in sumps',
    sentence: 'The change of liquid standing in the sumps is counted as 0.',
  });
  return notes.sort((a, b) => (a.when < b.when ? -1 : 1));
}
