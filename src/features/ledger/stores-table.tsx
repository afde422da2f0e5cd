import { addMonths, monthName } from '#shared/calendar/month.ts';
import { dayName, firstDay } from '#shared/calendar/day.ts';
import type { LedgerView, StoreBalanceView } from '#shared/views/month-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { Empty } from '../../components/state.tsx';
import { Word } from '../../components/words.tsx';
import { formatM3, formatSigned } from '../../lib/format-quantity.ts';

/** Stores of the month from opening to closing, with what is not accounted for and its tolerance. */
export function StoresTable({ view }: { view: LedgerView }) {
  if (!view.stores.length) return <Empty>No pond or tank is set up. An engineer adds one under Site.</Empty>;
  const lines: [string, (balance: StoreBalanceView) => string, boolean][] = [
    [`Opening, ${dayName(firstDay(view.month))}`, (one) => formatM3(one.openingM3), false],
    ['In, by meter and ticket', (one) => formatSigned(one.inM3), false],
    ['Rain on it', (one) => formatSigned(one.rainM3), false],
    ['Out, by meter and ticket', (one) => formatSigned(-one.outM3), false],
    ['Evaporated', (one) => formatSigned(-one.evaporationM3), false],
    ['Expected closing', (one) => formatM3(one.expectedClosingM3), true],
    [
      `Measured closing, ${dayName(firstDay(addMonths(view.month, 1)))}`,
      (one) => formatM3(one.measuredClosingM3),
      false,
    ],
    ['Unaccounted', (one) => formatSigned(one.unaccountedM3), true],
    ['Tolerance', (one) => `±${formatM3(one.toleranceM3)}`, false],
  ];
  const whole = view.stores.filter((store) => store.balance);
  return (
    <>
      {whole.length > 0 && (
        <ScrollBox label="Stores, opening to closing">
          <table className="tbl">
            <caption className="sr-only">Stores in {monthName(view.month)}, opening to closing, m³</caption>
            <thead>
              <tr>
                <th scope="col">m³</th>
                {whole.map((store) => (
                  <th key={store.id} scope="col" className="r">
                    {store.code}
                  </th>
                ))}
              </tr>
            </thead>
            <tbody>
              {lines.map(([name, value, isStrong]) => (
                <tr key={name} className={isStrong ? 'total' : ''}>
                  <th scope="row">{name}</th>
                  {whole.map((store) => (
                    <td key={store.id} className="r">
                      {value(store.balance!)}
                    </td>
                  ))}
                </tr>
              ))}
            </tbody>
          </table>
        </ScrollBox>
      )}
      <ul className="mt-3 grid gap-2 list-none">
        {view.stores.map((store) => (
          <li key={store.id}>
            {store.balance ? (
              <>
                <Word look={store.balance.isInside ? 'good' : 'ask'}>
                  {store.balance.isInside ? 'Inside' : 'Outside'}
                </Word>{' '}
                <span className="hint">
                  {store.code}: level resolution and meters, together in quadrature.
                </span>
              </>
            ) : (
              <>
                <Word look="ask">Not closed</Word> {store.code}: {store.missing}
              </>
            )}
          </li>
        ))}
      </ul>
    </>
  );
}
