import { eq, inArray } from 'drizzle-orm';
import type { RegisterSpec } from '#shared/ledger/register.ts';
import { Problem } from '#shared/problems.ts';
import { volumeUnitsM3 } from '#shared/units/unit-factors.ts';
import type { EntrySourceView } from '#shared/views/month-view.ts';
import { meterEvents } from '../../db/schema/metering.ts';
import { adjustments, entries, loadsOut, readings } from '../../db/schema/ledger.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context } from '../../http/route.ts';
import { listNames } from '../people/people-repository.ts';
import { readSite, siteDaysOf, siteOf } from '../sites/site-service.ts';
import { registerAt } from '../readings/reading-service.ts';
import { recomputeDays } from './posting-service.ts';

/** Unit of a register as it stands beside its number. */
const registerWords = ({ unit, multiplier }: RegisterSpec) =>
  `${Number(multiplier) === 1 ? '' : `× ${Number(multiplier)} `}${volumeUnitsM3[unit].label}`;

/** Where the number of an entry comes from: the readings, events, layers or ticket behind it, and the intervals of its day. */
export async function readEntrySource(
  tx: Transaction,
  context: Context,
  entryId: string,
): Promise<EntrySourceView> {
  const record = await readSite(tx, siteOf(context));
  const [entry] = await tx.select().from(entries).where(eq(entries.id, entryId));
  if (!entry || entry.siteId !== record.site.id)
    throw new Problem('not-found', 'There is no such entry at this site.');
  const days = await siteDaysOf(tx, record.site.id);
  const names = await listNames(tx);
  const factIds = entry.factIds as string[];
  const local = (at: string) => days.localTime(Date.parse(at));
  const facts = [
    ...(await tx.select().from(readings).where(inArray(readings.id, factIds))).map((row) => ({
      id: row.id,
      kind: 'reading',
      when: local(row.observedAt),
      words: `${row.typedText} ${registerWords(registerAt(record, row.meterId, Date.parse(row.observedAt)))}`,
      by: names.get(row.recordedById) ?? '',
      note: row.note ?? row.reason,
    })),
    ...(await tx.select().from(meterEvents).where(inArray(meterEvents.id, factIds))).map((row) => ({
      id: row.id,
      kind: 'meter event',
      when: local(row.observedAt),
      words: `${row.kind.replace('-', ' ')}: register ${row.registerBefore ?? '–'} before, ${row.registerAfter ?? '–'} after`,
      by: names.get(row.recordedById) ?? '',
      note: row.note,
    })),
    ...(await tx.select().from(adjustments).where(inArray(adjustments.id, factIds))).map((row) => ({
      id: row.id,
      kind: row.kind,
      when: `${local(row.fromAt)} to ${local(row.toAt)}`,
      words: row.volumeM3
        ? `${Number(row.volumeM3)} m³, ${row.method ?? ''}: ${(row.inputs as { text?: string } | null)?.text ?? ''}`
        : `÷ ${row.divisor ?? ''}`,
      by: names.get(row.recordedById) ?? '',
      note: row.reason,
    })),
    ...(await tx.select().from(loadsOut).where(inArray(loadsOut.id, factIds))).map((row) => ({
      id: row.id,
      kind: 'ticket',
      when: local(row.observedAt),
      words: `${row.ticket}, ${row.hauler}, ${row.officialVolume} volume`,
      by: names.get(row.recordedById) ?? '',
      note: row.reason,
    })),
  ].sort((a, b) => (a.when < b.when ? -1 : 1));
  const meter = record.meters.find((one) => one.id === entry.meterId);
  const startMs = days.startMs(entry.siteDay);
  const iso = (ms: number) => new Date(ms).toISOString();
  const computed = meter
    ? await recomputeDays(
        tx,
        record,
        meter,
        days,
        iso(startMs - 8 * 86_400_000),
        iso(startMs + 9 * 86_400_000),
      )
    : null;
  return {
    id: entry.id,
    siteDay: entry.siteDay,
    volumeM3: entry.volumeM3,
    basis: entry.basis,
    reason: entry.reason,
    recordedAt: entry.recordedAt,
    by: names.get(entry.recordedById) ?? '',
    facts,
    meter: meter && { code: meter.code, name: meter.name },
    intervals: (computed?.intervals ?? [])
      .filter((one) => one.fromMs < startMs + 86_400_000 * 1.05 && one.toMs > startMs)
      .map((one) => ({
        from: days.localTime(one.fromMs),
        to: days.localTime(one.toMs),
        hours: (one.toMs - one.fromMs) / 3_600_000,
        opening: one.opening,
        closing: one.closing,
        wrap: one.wrap,
        multiplier: one.multiplier,
        unit: one.unit,
        volumeM3: one.volumeM3?.toFixed(6) ?? null,
        basis: one.basis,
        heldBecause: one.heldBecause,
      })),
  };
}
