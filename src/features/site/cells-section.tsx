import { dayName } from '#shared/calendar/day.ts';
import type { SiteStructureView } from '#shared/views/site-view.ts';
import { usePlace } from '../../app/place.ts';
import { ScrollBox, Section } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { CellForm, CellNameForm, CoverCorrectionForm, CoverForm, WasteForm } from './cell-forms.tsx';
import { FormLink, m2, type SectionProps } from './site-parts.tsx';

function PlotRows({ view, cell }: SectionProps & { cell: SiteStructureView['cells'][number] }) {
  const { can } = usePlace();
  const plots = view.plots
    .filter((plot) => plot.cellId === cell.id)
    .sort((a, b) => (a.toOn === null ? 0 : 1) - (b.toOn === null ? 0 : 1) || (a.fromOn < b.fromOn ? -1 : 1));
  return plots.map((plot) => {
    const periods = view.coverPeriods.filter((period) => period.plotId === plot.id);
    return (
      <tr key={plot.id} className={plot.toOn ? 'text-muted' : ''}>
        <th scope="row">
          {plot.name}
          <span className="hint block">
            {plot.toOn ? `ended ${dayName(plot.toOn)}: split` : `since ${dayName(plot.fromOn)}`}
          </span>
        </th>
        <td className="r">{m2(plot.areaM2)}</td>
        <td>
          {periods.map((period) => (
            <span key={period.id} className="block">
              {view.coverTypes.find((type) => type.id === period.coverTypeId)?.name}, from{' '}
              {dayName(period.fromOn)}
              {period.toOn ? ` to ${dayName(period.toOn)}` : ''}{' '}
              <span className="hint">({period.evidence})</span>{' '}
              {can('change:site') && (
                <FormLink label="Correct" title={`Correct a cover, ${cell.code} ${plot.name}`}>
                  {(onDone) => <CoverCorrectionForm view={view} period={period} onDone={onDone} />}
                </FormLink>
              )}
            </span>
          ))}
        </td>
        <td>
          {!plot.toOn && can('change:site') && (
            <FormLink label="Change cover" title={`Change cover, ${cell.code} ${plot.name}`}>
              {(onDone) => <CoverForm view={view} plotId={plot.id} onDone={onDone} />}
            </FormLink>
          )}
        </td>
      </tr>
    );
  });
}

/** Cells with their dated areas, plots and cover history. */
export function CellsSection({ view }: SectionProps) {
  const { can } = usePlace();
  return (
    <Section
      title="Cells, plots and covers"
      id="cells"
      aside={
        can('change:site') && (
          <FormLink label="Add a cell">{(onDone) => <CellForm view={view} onDone={onDone} />}</FormLink>
        )
      }
    >
      {view.cells.length === 0 && (
        <Empty>
          There is no cell yet. Add the first one: its lined area, the day it opened, and the plots that make
          it up.
        </Empty>
      )}
      <div className="grid gap-5">
        {view.cells.map((cell) => {
          const area = view.cellAreas.filter((one) => one.cellId === cell.id).at(-1);
          const waste = view.wastePlaced.filter((one) => one.cellId === cell.id);
          return (
            <div key={cell.id}>
              <p className="mb-2 flex flex-wrap gap-x-4">
                <strong>
                  {cell.code} {cell.name}
                </strong>
                <span>
                  {area && `${m2(area.linedAreaM2)} m² lined`}, opened {dayName(cell.openedOn)}
                  {cell.closedOn && `, closed ${dayName(cell.closedOn)}`}
                </span>
                <span className="text-muted">
                  {waste.length
                    ? `${formatNumber(waste.reduce((sum, one) => sum + Number(one.massT), 0))} t placed in ${waste.length} months`
                    : 'no waste recorded'}
                </span>
                {can('change:site') && (
                  <>
                    <FormLink label="Record waste" title={`Record waste, ${cell.code}`}>
                      {(onDone) => <WasteForm cellId={cell.id} onDone={onDone} />}
                    </FormLink>
                    <FormLink label="Rename" title={`Rename ${cell.code}`}>
                      {(onDone) => <CellNameForm cell={cell} onDone={onDone} />}
                    </FormLink>
                  </>
                )}
              </p>
              <ScrollBox label={`Plots of ${cell.code}`}>
                <table className="tbl tbl-tight">
                  <caption className="sr-only">
                    Plots of {cell.code} {cell.name} and their covers
                  </caption>
                  <thead>
                    <tr>
                      <th scope="col">Plot</th>
                      <th scope="col" className="r">
                        Area, m²
                      </th>
                      <th scope="col">Covers</th>
                      <th scope="col">
                        <span className="sr-only">Act</span>
                      </th>
                    </tr>
                  </thead>
                  <tbody>
                    <PlotRows view={view} cell={cell} />
                  </tbody>
                </table>
              </ScrollBox>
            </div>
          );
        })}
      </div>
    </Section>
  );
}
