import type { ComputedCase } from '#shared/method/published-cases.ts';
import type { ComputedValue } from '#shared/method/published-values.ts';
import { ScrollBox, Section } from '../../components/page.tsx';
import { formatNumber, formatSigned } from '../../lib/format-quantity.ts';

const monthNames = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];

const largest = (values: readonly number[]) => Math.max(...values.map(Math.abs));
export const largestDifference = (one: ComputedCase): { differs: number; unit: string } => {
  const all = one.columns.map((column) => ({
    differs: largest(column.computed.map((value, index) => value - column.printed[index]!)),
    unit: column.unit,
  }));
  return all.reduce((most, column) => (column.differs > most.differs ? column : most));
};

/** A published table beside the same numbers computed in this browser, with the differences. */
export function CaseTable({ one }: { one: ComputedCase }) {
  const isOutside = one.columns.some((column) =>
    column.computed.some((value, index) => Math.abs(value - column.printed[index]!) > column.tolerance),
  );
  return (
    <Section
      title={one.title}
      aside={isOutside ? 'outside its tolerance' : 'inside its tolerance'}
      id={one.id}
    >
      <ScrollBox label={one.title}>
        <table className="tbl tbl-tight">
          <caption className="sr-only">{one.title}: printed, computed and difference</caption>
          <thead>
            <tr>
              <th scope="col" rowSpan={2} className="sticky left-0 bg-surface">
                Month
              </th>
              {one.given.map((column) => (
                <th key={column.name} scope="col" rowSpan={2} className="r">
                  {column.name}
                  {column.unit && `, ${column.unit}`}
                </th>
              ))}
              {one.columns.map((column) => (
                <th
                  key={column.name}
                  scope="colgroup"
                  colSpan={3}
                  className="!text-center border-l border-line"
                >
                  {column.name}
                  {column.unit && `, ${column.unit}`}
                </th>
              ))}
            </tr>
            <tr>
              {one.columns.flatMap((column) =>
                ['printed', 'computed', 'differs'].map((what, index) => (
                  <th
                    key={column.name + what}
                    scope="col"
                    className={`r ${index === 0 ? 'border-l border-line' : ''}`}
                  >
                    {what}
                  </th>
                )),
              )}
            </tr>
          </thead>
          <tbody>
            {monthNames.map((month, index) => (
              <tr key={month}>
                <th scope="row" className="sticky left-0 bg-surface">
                  {month}
                </th>
                {one.given.map((column) => (
                  <td key={column.name} className="r text-muted">
                    {formatNumber(column.values[index]!, Number.isInteger(column.values[index]) ? 0 : 1)}
                  </td>
                ))}
                {one.columns.flatMap((column) => {
                  const [printed, computed] = [column.printed[index]!, column.computed[index]!];
                  return [
                    <td key={`${column.name}p`} className="r border-l border-line">
                      {printed}
                    </td>,
                    <td key={`${column.name}c`} className="r font-medium">
                      {formatNumber(computed, column.decimals)}
                    </td>,
                    <td key={`${column.name}d`} className="r text-muted">
                      {formatSigned(computed - printed, column.decimals)}
                    </td>,
                  ];
                })}
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
      <p className="hint mt-2 max-w-[96ch]">
        {one.source}. {one.locator}.{' '}
        {one.isFromMemory
          ? 'The printed values are remembered from reprints, not read in the report.'
          : 'Read in the source.'}{' '}
        {one.law} {one.note}
      </p>
    </Section>
  );
}

/** One digit more than the tolerance asks for. */
const decimalsOf = ({ tolerance }: ComputedValue) =>
  Math.min(6, Math.max(1, Math.ceil(-Math.log10(tolerance)) + 1));

export function ValueTable({ label, values }: { label: string; values: readonly ComputedValue[] }) {
  const titles = [...new Set(values.map((one) => one.title))];
  return (
    <ScrollBox label={label}>
      <table className="tbl tbl-tight [&_td]:!py-1 [&_th]:!py-1">
        <caption className="sr-only">{label} beside what is computed here</caption>
        <thead>
          <tr>
            <th scope="col">What</th>
            <th scope="col" className="r">
              Printed
            </th>
            <th scope="col" className="r">
              Computed
            </th>
            <th scope="col" className="r">
              Differs
            </th>
            <th scope="col">Unit</th>
          </tr>
        </thead>
        {titles.map((title) => {
          const own = values.filter((one) => one.title === title);
          return (
            <tbody key={title} className="border-t border-edge">
              <tr>
                <th scope="rowgroup" colSpan={5} className="!pt-3">
                  <span className="font-semibold">{title}</span>
                  <span className="hint block max-w-[100ch]">
                    {own[0]!.source}
                    {own[0]!.isFromMemory ? ' (from memory)' : ''}
                  </span>
                </th>
              </tr>
              {own.map((one) => (
                <tr key={one.id}>
                  <th scope="row">{one.what}</th>
                  <td className="r">{one.printed}</td>
                  <td className="r font-medium">{formatNumber(one.computed, decimalsOf(one))}</td>
                  <td className="r text-muted">
                    {formatSigned(one.computed - one.printed, decimalsOf(one))}
                  </td>
                  <td>{one.unit}</td>
                </tr>
              ))}
            </tbody>
          );
        })}
      </table>
    </ScrollBox>
  );
}
