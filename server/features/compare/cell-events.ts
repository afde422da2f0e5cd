import type { DatedEvent } from '#shared/reconciliation/double-mass.ts';
import type { SiteRecord } from '../sites/site-service.ts';

/** What happened at a cell: cover changes and meter events, each on its day. */
export function cellEvents(record: SiteRecord, cellId: string): DatedEvent[] {
  const plotIds = new Set(record.plots.filter((plot) => plot.cellId === cellId).map((plot) => plot.id));
  const first = new Map<string, string>();
  for (const period of record.coverPeriods)
    if (!first.has(period.plotId)) first.set(period.plotId, period.id);
  const covers = record.coverPeriods
    .filter(
      (period) =>
        plotIds.has(period.plotId) &&
        period.fromOn > record.cells.find((cell) => cell.id === cellId)!.openedOn,
    )
    .filter((period) => {
      const plot = record.plots.find((one) => one.id === period.plotId)!;
      const parentCover = record.coverPeriods
        .filter((one) => one.plotId === plot.parentId)
        .at(-1)?.coverTypeId;
      return first.get(period.plotId) !== period.id || parentCover !== period.coverTypeId;
    })
    .map((period) => {
      const plot = record.plots.find((one) => one.id === period.plotId)!;
      const type = record.coverTypes.find((one) => one.id === period.coverTypeId)!;
      return {
        onDay: period.fromOn,
        kind: 'cover' as const,
        sentence: `${(Number(plot.areaM2) / 10_000).toFixed(1)} ha became ${type.name}`,
      };
    });
  const sumpIds = new Set(record.sumps.filter((sump) => sump.cellId === cellId).map((sump) => sump.id));
  const meters = record.meters.filter((meter) => meter.sumpId && sumpIds.has(meter.sumpId));
  const meterEvents = record.meterEvents
    .filter((event) => meters.some((meter) => meter.id === event.meterId))
    .map((event) => ({
      onDay: event.siteDay,
      kind: 'meter' as const,
      sentence: `${meters.find((meter) => meter.id === event.meterId)!.code} meter: ${event.kind.replace('-', ' ')}`,
    }));
  return [...covers, ...meterEvents].sort((a, b) => (a.onDay < b.onDay ? -1 : 1));
}
