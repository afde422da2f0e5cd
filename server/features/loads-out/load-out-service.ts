import { Decimal } from 'decimal.js';
import type * as z from 'zod';
import { dayName } from '#shared/calendar/day.ts';
import { monthOfDay } from '#shared/calendar/day.ts';
import { Problem, fieldProblem } from '#shared/problems.ts';
import type { loadOutInput, voidInput } from '#shared/schemas/readings.ts';
import { recordChange } from '../../audit/record-change.ts';
import type { Transaction } from '../../db/transaction.ts';
import type { Context, Dependencies } from '../../http/route.ts';
import * as repository from '../ledger/entry-repository.ts';
import { resolveObservedAt } from '../readings/observed-time.ts';
import { readSite, siteOf } from '../sites/site-service.ts';

/** Density used when a ticket gives masses only: leachate is close to water. Common practice, no source. */
const densityDefaultKgPerM3 = '1000';

/** The volume a load counts with in the ledger, m³, exact. */
export function officialVolumeM3(
  load: Pick<
    z.output<typeof loadOutInput>,
    | 'officialVolume'
    | 'nominalVolumeM3'
    | 'grossMassKg'
    | 'tareMassKg'
    | 'densityKgPerM3'
    | 'receivedVolumeM3'
  >,
): Decimal {
  if (load.officialVolume === 'received') return new Decimal(load.receivedVolumeM3!);
  if (load.officialVolume === 'nominal') return new Decimal(load.nominalVolumeM3!);
  return new Decimal(load.grossMassKg!)
    .minus(load.tareMassKg!)
    .div(load.densityKgPerM3 ?? densityDefaultKgPerM3)
    .toDecimalPlaces(6);
}

async function refuseClosed(tx: Transaction, siteId: string, siteDay: string): Promise<void> {
  const closed = await repository.listClosedMonths(tx, siteId);
  if (closed.has(monthOfDay(siteDay)))
    throw new Problem(
      'month-is-closed',
      `The month of ${dayName(siteDay)} is closed. Ask the site manager to reopen it, then enter the load.`,
    );
}

/** Stores a truck load with its three volumes and posts the official one. */
export async function createLoadOut(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  input: z.output<typeof loadOutInput>,
) {
  const siteId = siteOf(context);
  await repository.lockSiteLedger(tx, siteId);
  const record = await readSite(tx, siteId);
  for (const key of ['fromPlaceId', 'toPlaceId'] as const) {
    if (!record.places.some((place) => place.id === input[key]))
      throw fieldProblem(`/${key}`, 'Choose a place of this site.');
  }
  const observed = await resolveObservedAt(tx, siteId, deps.now(), input);
  await refuseClosed(tx, siteId, observed.siteDay);
  const same = await repository.findLiveTicket(tx, siteId, input.hauler, input.ticket);
  if (same)
    throw fieldProblem(
      '/ticket',
      `Ticket ${input.ticket} of ${input.hauler} was entered for ${dayName(same.siteDay)}. One ticket counts once: void the other first if it is wrong.`,
    );
  const volume = officialVolumeM3(input);
  if (volume.isZero() && !input.isConfirmed)
    throw fieldProblem('/nominalVolumeM3', 'A load of 0 m³? Save once more if the truck left empty.');
  const common = { organisationId: context.organisationId, recordedById: context.personId, siteId };
  await repository.insertLoadOut(tx, {
    ...common,
    id: input.id,
    ticket: input.ticket,
    hauler: input.hauler,
    truck: input.truck ?? null,
    fromPlaceId: input.fromPlaceId,
    toPlaceId: input.toPlaceId,
    observedAt: observed.observedAt,
    observedOffsetMinutes: observed.observedOffsetMinutes,
    siteDay: observed.siteDay,
    nominalVolumeM3: input.nominalVolumeM3 ?? null,
    grossMassKg: input.grossMassKg ?? null,
    tareMassKg: input.tareMassKg ?? null,
    densityKgPerM3: input.densityKgPerM3 ?? null,
    receivedVolumeM3: input.receivedVolumeM3 ?? null,
    officialVolume: input.officialVolume,
    deviceId: input.deviceId ?? null,
    recordedAt: deps.now().toISOString(),
  });
  await repository.insertEntries(tx, [
    {
      ...common,
      id: deps.newId(),
      siteDay: observed.siteDay,
      fromPlaceId: input.fromPlaceId,
      toPlaceId: input.toPlaceId,
      volumeM3: volume.toFixed(6),
      basis: input.officialVolume === 'nominal' ? 'estimated' : 'measured',
      loadOutId: input.id,
      factIds: [input.id],
      reason: `Ticket ${input.ticket}, ${input.officialVolume} volume`,
    },
  ]);
  await recordChange(tx, context, {
    action: 'create',
    subjectType: 'loads-out',
    subjectId: input.id,
    sentence: `Load out, ticket ${input.ticket} of ${input.hauler}: ${volume.toFixed()} m³ (${input.officialVolume}).`,
    after: input,
  });
  return {
    id: input.id,
    state: 'stored' as const,
    siteDay: observed.siteDay,
    observedAt: observed.observedAt,
  };
}

/** Voids a load: its entry is reversed, the ticket stays readable. */
export async function voidLoadOut(
  tx: Transaction,
  context: Context,
  deps: Dependencies,
  loadId: string,
  input: z.output<typeof voidInput>,
) {
  const siteId = siteOf(context);
  await repository.lockSiteLedger(tx, siteId);
  const load = await repository.findLoadOut(tx, loadId);
  if (!load || load.siteId !== siteId) throw new Problem('not-found', 'There is no such load at this site.');
  await refuseClosed(tx, siteId, load.siteDay);
  const { sequence: _sequence, recordedAt: _recordedAt, ...copy } = load;
  await repository.insertLoadOut(tx, {
    ...copy,
    id: input.id,
    recordedById: context.personId,
    supersedesId: load.id,
    isVoid: 'yes',
    reason: input.reason,
  });
  const posted = await repository.findEntriesOfLoad(tx, load.id);
  await repository.insertEntries(
    tx,
    posted.map(({ sequence: _s, recordedAt: _r, ...entry }) => ({
      ...entry,
      id: deps.newId(),
      recordedById: context.personId,
      reversesId: entry.id,
      volumeM3: new Decimal(entry.volumeM3).neg().toFixed(6),
      reason: input.reason,
    })),
  );
  await recordChange(tx, context, {
    action: 'void',
    subjectType: 'loads-out',
    subjectId: load.id,
    sentence: `Ticket ${load.ticket} of ${load.hauler} was voided.`,
    reason: input.reason,
    before: load,
  });
  return { id: input.id };
}
