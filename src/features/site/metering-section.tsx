import { dayName } from '#shared/calendar/day.ts';
import { volumeUnitsM3, type VolumeUnit } from '#shared/units/unit-factors.ts';
import { usePlace } from '../../app/place.ts';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { cellName, FormLink, type SectionProps } from './site-parts.tsx';
import { EventForm, MeterForm, PlaceForm, StoreForm, SumpForm, eventNames } from './metering-forms.tsx';

function MeterTable({ view }: SectionProps) {
  const place = (id: string) => view.places.find((one) => one.id === id)?.name ?? '';
  return (
    <ScrollBox label="Meters">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Meters and their events</caption>
        <thead>
          <tr>
            <th scope="col">Meter</th>
            <th scope="col">From, to</th>
            <th scope="col">Register</th>
            <th scope="col" className="r">
              Largest day, m³/d
            </th>
            <th scope="col">Events</th>
          </tr>
        </thead>
        <tbody>
          {view.meters.map((meter) => (
            <tr key={meter.id}>
              <th scope="row">
                {meter.code} {meter.name}
                <span className="hint block">since {dayName(meter.installedOn)}</span>
              </th>
              <td>
                {place(meter.fromPlaceId)} → {place(meter.toPlaceId)}
              </td>
              <td>
                {meter.digits} digits{meter.decimals ? `, ${meter.decimals} after the point` : ''},{' '}
                {volumeUnitsM3[meter.unit as VolumeUnit].label}
                {Number(meter.multiplier) === 1 ? '' : ` × ${meter.multiplier}`}
              </td>
              <td className="r">{meter.rateM3PerDayMax}</td>
              <td>
                {view.meterEvents
                  .filter((event) => event.meterId === meter.id)
                  .map((event) => (
                    <span key={event.id} className="block">
                      {dayName(event.siteDay)}: {eventNames[event.kind as keyof typeof eventNames]}
                      {event.registerBefore
                        ? `, ${Number(event.registerBefore)} → ${Number(event.registerAfter)}`
                        : ''}
                      {event.unitAfter ? ` ${volumeUnitsM3[event.unitAfter as VolumeUnit].label}` : ''}
                      {event.multiplierAfter ? ` × ${Number(event.multiplierAfter)}` : ''}
                    </span>
                  ))}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

/** Sumps, meters with their events, stores and places: where water can be and what measures it. */
export function MeteringSection({ view }: SectionProps) {
  const { can } = usePlace();
  const mayChange = can('change:site');
  return (
    <>
      <Section
        title="Sumps"
        id="sumps"
        aside={
          mayChange &&
          view.cells.length > 0 && (
            <FormLink label="Add a sump">{(onDone) => <SumpForm view={view} onDone={onDone} />}</FormLink>
          )
        }
      >
        {view.sumps.length === 0 ? (
          <Empty>No sump yet. Each cell drains to one, sometimes to a second for leak detection.</Empty>
        ) : (
          <ScrollBox label="Sumps">
            <table className="tbl tbl-tight">
              <caption className="sr-only">Sumps</caption>
              <thead>
                <tr>
                  <th scope="col">Sump</th>
                  <th scope="col">Cell</th>
                  <th scope="col">Kind</th>
                  <th scope="col" className="r">
                    Drains, m²
                  </th>
                  <th scope="col" className="r">
                    Liner above floor, m
                  </th>
                  <th scope="col" className="r">
                    Head limit, m
                  </th>
                  <th scope="col" className="r">
                    Action rate, L/ha·d
                  </th>
                </tr>
              </thead>
              <tbody>
                {view.sumps.map((sump) => (
                  <tr key={sump.id}>
                    <th scope="row">{sump.code}</th>
                    <td>{cellName(view, sump.cellId)}</td>
                    <td>{sump.kind === 'primary' ? 'primary' : 'leak detection'}</td>
                    <td className="r">{formatNumber(Number(sump.areaServedM2))}</td>
                    <td className="r">{sump.linerLowPointAboveFloorM}</td>
                    <td className="r">{sump.headLimitM ?? 'none set'}</td>
                    <td className="r">{sump.actionRateLPerHaDay ?? '–'}</td>
                  </tr>
                ))}
              </tbody>
            </table>
          </ScrollBox>
        )}
        <p className="hint mt-2">
          A sump, manhole or wet well can hold gas or no oxygen. The record never permits entry: test the air.
        </p>
      </Section>
      <Section
        title="Meters"
        id="meters"
        aside={
          <span className="flex gap-4">
            {mayChange && (
              <FormLink label="Add a meter">{(onDone) => <MeterForm view={view} onDone={onDone} />}</FormLink>
            )}
            {can('settle:reading') && view.meters.length > 0 && (
              <FormLink label="Record a meter event">
                {(onDone) => <EventForm view={view} onDone={onDone} />}
              </FormLink>
            )}
          </span>
        }
      >
        {view.meters.length === 0 ? (
          <Empty>No meter yet. A meter measures the water from one place to another.</Empty>
        ) : (
          <MeterTable view={view} />
        )}
      </Section>
      <Section
        title="Stores and places"
        id="stores"
        aside={
          mayChange && (
            <span className="flex gap-4">
              <FormLink label="Add a store">{(onDone) => <StoreForm onDone={onDone} />}</FormLink>
              <FormLink label="Add a place">{(onDone) => <PlaceForm onDone={onDone} />}</FormLink>
            </span>
          )
        }
      >
        {view.stores.map((store) => {
          const table = view.storeLevels.filter((row) => row.storeId === store.id);
          return (
            <details key={store.id} className="sheet pad mb-3">
              <summary className="cursor-pointer font-medium min-h-6">
                {store.code}: {store.isCovered ? 'covered' : 'open'}, crest {store.crestLevelM} m, operating
                level {store.operatingLevelM} m, {table.length} rows of level and volume
              </summary>
              <table className="tbl tbl-tight mt-2">
                <caption className="sr-only">Level and volume of {store.code}</caption>
                <thead>
                  <tr>
                    <th scope="col" className="r">
                      Level, m
                    </th>
                    <th scope="col" className="r">
                      Volume, m³
                    </th>
                    <th scope="col" className="r">
                      Surface, m²
                    </th>
                  </tr>
                </thead>
                <tbody>
                  {table.map((row) => (
                    <tr key={row.levelM}>
                      <td className="r">{row.levelM}</td>
                      <td className="r">{formatNumber(Number(row.volumeM3), 1)}</td>
                      <td className="r">{formatNumber(Number(row.surfaceM2), 1)}</td>
                    </tr>
                  ))}
                </tbody>
              </table>
            </details>
          );
        })}
        <p>Places: {view.places.map((place) => place.name).join(', ')}.</p>
      </Section>
      <Section title="Walking order" id="order">
        <ol className="sheet lines px-4 list-none">
          {view.roundPoints.map((point) => (
            <li key={point.id} className="!py-2">
              {point.position}. {pointName(view, point)}
              {point.everyDays > 1 && <span className="hint"> every {point.everyDays} days</span>}
            </li>
          ))}
        </ol>
      </Section>
    </>
  );
}

function pointName(view: SectionProps['view'], point: SectionProps['view']['roundPoints'][number]): string {
  const found = [...view.meters, ...view.stations].find((one) => one.id === point.subjectId);
  if (found) return found.name;
  const store =
    view.stores.find((one) => one.id === point.subjectId) ??
    view.sumps.find((one) => one.id === point.subjectId);
  return `${store?.code ?? point.kind}, level`;
}
