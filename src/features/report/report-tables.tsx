import { monthName, monthShortName } from '#shared/calendar/month.ts';
import { totalPairs } from '#shared/reconciliation/total-pairs.ts';
import type { ReportView } from '#shared/views/lab-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { VerdictWord } from '../../components/words.tsx';
import { formatM3, formatNumber, formatSigned } from '../../lib/format-quantity.ts';

export function VolumeTable({ view }: { view: ReportView }) {
  const of = (code: string, month: string) =>
    view.cellMonths.find((one) => one.cellCode === code && one.month === month);
  const line = (name: string, rows: (month: string) => ReportView['cellMonths']) => {
    const all = view.months.flatMap(rows);
    const quarter = totalPairs(all);
    return (
      <>
        <th scope="row">{name}</th>
        {view.months.map((month) => {
          const own = rows(month);
          const total = totalPairs(own);
          const none = own.length ? null : 'not open';
          return [
            <td key={`${month}p`} className="r">
              {total.predictedM3 === null ? (none ?? 'no prediction') : formatM3(total.predictedM3)}
            </td>,
            <td key={`${month}m`} className="r">
              {total.measuredM3 !== null ? (
                <>
                  {own.some((row) => row.estimatedM3 > 0) && '◌ '}
                  {own.some((row) => row.allocatedM3 > 0) && '⊕ '}
                  {formatM3(total.measuredM3)}
                </>
              ) : (
                (none ?? 'not read')
              )}
            </td>,
          ];
        })}
        <td className="r font-semibold">
          {quarter.predictedM3 === null ? 'no prediction' : formatM3(quarter.predictedM3)}
        </td>
        <td className="r font-semibold">
          {quarter.measuredM3 === null ? 'not read' : formatM3(quarter.measuredM3)}
        </td>
        <td className="r font-semibold">
          {quarter.differenceM3 === null ? 'not whole' : formatSigned(quarter.differenceM3)}
        </td>
      </>
    );
  };
  return (
    <ScrollBox label="Leachate, predicted and pumped">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Leachate by cell, predicted and pumped, m³</caption>
        <thead>
          <tr>
            <th scope="col">Leachate, m³</th>
            {view.months.flatMap((month) => [
              <th key={`${month}p`} scope="col" className="r">
                {monthShortName(month)} predicted
              </th>,
              <th key={`${month}m`} scope="col" className="r">
                {monthShortName(month)} pumped
              </th>,
            ])}
            <th scope="col" className="r">
              Quarter predicted
            </th>
            <th scope="col" className="r">
              Quarter pumped
            </th>
            <th scope="col" className="r">
              Quarter gap
            </th>
          </tr>
        </thead>
        <tbody>
          {view.cells.map((cell) => (
            <tr key={cell.code}>
              {line(`${cell.code} ${cell.name}`, (month) => {
                const row = of(cell.code, month);
                return row?.isOpen ? [row] : [];
              })}
            </tr>
          ))}
        </tbody>
        <tfoot>
          <tr>
            {line('Site', (month) => view.cellMonths.filter((one) => one.month === month && one.isOpen))}
          </tr>
        </tfoot>
      </table>
    </ScrollBox>
  );
}

/** One row a limit, one column a month. */
export function VerdictTable({ view }: { view: ReportView }) {
  const key = (row: ReportView['verdicts'][number]) =>
    `${row.pointCode} ${row.analyteName} ${row.statistic} ${row.quantity} ${row.limit}`;
  const limits = [...new Map(view.verdicts.map((row) => [key(row), row])).entries()];
  return (
    <ScrollBox label="Effluent against limits">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Effluent against limits by month</caption>
        <thead>
          <tr>
            <th scope="col">Parameter</th>
            <th scope="col" className="r">
              Limit
            </th>
            {view.months.map((month) => (
              <th key={month} scope="col">
                {monthName(month)}
              </th>
            ))}
          </tr>
        </thead>
        <tbody>
          {limits.map(([id, first]) => (
            <tr key={id}>
              <th scope="row">
                {first.pointCode}, {first.analyteName}
                <span className="hint block">
                  {first.statistic.replace('-', ' ')}
                  {first.quantity === 'load' ? ', load' : ''}
                </span>
              </th>
              <td className="r">
                {first.limit} {first.unit}
              </td>
              {view.months.map((month) => {
                const row = view.verdicts.find((one) => key(one) === id && one.month === month);
                return (
                  <td key={month}>
                    {row ? (
                      <>
                        <VerdictWord word={row.word} /> <span className="hint">{row.valueText ?? ''}</span>
                      </>
                    ) : (
                      '–'
                    )}
                  </td>
                );
              })}
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}

export function LeakTable({ view }: { view: ReportView }) {
  return (
    <ScrollBox label="Leak detection">
      <table className="tbl tbl-tight">
        <caption className="sr-only">Leak detection by sump and month</caption>
        <thead>
          <tr>
            <th scope="col">Sump</th>
            <th scope="col">Month</th>
            <th scope="col" className="r">
              Volume, m³
            </th>
            <th scope="col" className="r">
              Rate, L/ha·d
            </th>
            <th scope="col" className="r">
              Action rate, L/ha·d
            </th>
          </tr>
        </thead>
        <tbody>
          {view.leakDetection.map((row) => (
            <tr key={row.sumpCode + row.month}>
              <th scope="row">{row.sumpCode}</th>
              <td>{monthName(row.month)}</td>
              <td className="r">{row.volumeM3 === null ? 'not read' : formatNumber(row.volumeM3, 2)}</td>
              <td className="r">{row.lPerHaDay === null ? '–' : formatNumber(row.lPerHaDay, 1)}</td>
              <td className="r">
                {row.actionRateLPerHaDay === null ? 'none set' : formatNumber(row.actionRateLPerHaDay, 0)}
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}
