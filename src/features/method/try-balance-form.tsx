import { useState } from 'react';
import { counted } from '#shared/count-words.ts';
import { parseNumber } from '#shared/ledger/parse-number.ts';
import { tryBalanceInput } from '#shared/schemas/balance.ts';
import { tryBalance, type TryBalanceMonth } from '#shared/water-balance/try-balance.ts';
import { ScrollBox } from '../../components/page.tsx';
import { formatExponent, formatNumber } from '../../lib/format-quantity.ts';

const monthNames = ['Jan', 'Feb', 'Mar', 'Apr', 'May', 'Jun', 'Jul', 'Aug', 'Sep', 'Oct', 'Nov', 'Dec'];
const rows = [
  ['precipitationMm', 'Rain, mm'],
  ['petMm', 'Potential ET, mm'],
  ['runoffCoefficient', 'Share that runs off'],
] as const;
type RowName = (typeof rows)[number][0];
type Typed = Record<RowName, string[]>;

const terms: [keyof TryBalanceMonth, string, number][] = [
  ['runoffMm', 'Runoff', 1],
  ['infiltrationMm', 'Into the soil', 1],
  ['surplusMm', 'Surplus or shortfall', 1],
  ['apwlMm', 'Accumulated loss (APWL)', 1],
  ['storeMm', 'Soil water, month end', 1],
  ['dStoreMm', 'Change of soil water', 1],
  ['aetMm', 'Evapotranspiration', 1],
  ['deficitMm', 'Deficit', 1],
  ['percolationMm', 'Percolation', 1],
];

function read(typed: Typed, capacity: string, law: string, start: string) {
  const problems: string[] = [];
  const number = (text: string, where: string) => {
    const parsed = parseNumber(text, { decimals: 6 });
    if (parsed.kind === 'number') return Number(parsed.value);
    problems.push(
      `${where}: ${text.trim() === '' ? 'enter a number' : parsed.kind === 'wrong' ? parsed.reason : parsed.question}`,
    );
    return NaN;
  };
  const values = Object.fromEntries(
    rows.map(([name, label]) => [
      name,
      typed[name].map((text, index) => number(text, `${label}, ${monthNames[index]}`)),
    ]),
  );
  const input = {
    ...values,
    capacityMm: number(capacity, 'Soil store'),
    soilLaw: law,
    start: start.trim() === '' ? 'spin-up' : number(start, 'Soil water before January'),
  };
  if (problems.length) return { problems };
  const parsed = tryBalanceInput.safeParse(input);
  return parsed.success
    ? { result: tryBalance(parsed.data) }
    : { problems: parsed.error.issues.map((issue) => issue.message) };
}

/** Twelve months of one soil cover, typed or pasted; every term follows at once, and nothing is stored. */
export function TryBalanceForm({ first }: { first: Typed & { capacity: string } }) {
  const [typed, setTyped] = useState<Typed>(first);
  const [capacity, setCapacity] = useState(first.capacity);
  const [law, setLaw] = useState('exponential');
  const [start, setStart] = useState('');
  const put = (name: RowName, index: number, text: string) => {
    const pasted = text.split(/[\t\n;]+|\s{2,}| (?=\S)/).filter((part) => part.trim() !== '');
    setTyped((before) => ({
      ...before,
      [name]: before[name].map((old, at) =>
        at === index
          ? pasted.length > 1
            ? pasted[0]!
            : text
          : pasted.length > 1 && at > index && at - index < pasted.length
            ? pasted[at - index]!
            : old,
      ),
    }));
  };
  const answer = read(typed, capacity, law, start);
  const field = (id: string, label: string, value: string, set: (text: string) => void, hint?: string) => (
    <div>
      <label className="label" htmlFor={id}>
        {label}
      </label>
      {hint && (
        <p className="hint" id={`${id}-hint`}>
          {hint}
        </p>
      )}
      <input
        id={id}
        className="input"
        value={value}
        inputMode="decimal"
        aria-describedby={hint ? `${id}-hint` : undefined}
        onChange={(event) => set(event.target.value)}
      />
    </div>
  );
  return (
    <div className="grid gap-5">
      <div className="sheet pad grid gap-4 sm:grid-cols-3 items-end">
        {field('try-capacity', 'Soil store, mm', capacity, setCapacity)}
        <div>
          <label className="label" htmlFor="try-law">
            Soil law
          </label>
          <select id="try-law" className="input" value={law} onChange={(event) => setLaw(event.target.value)}>
            <option value="exponential">exponential (Thornthwaite and Mather)</option>
            <option value="equal-availability">equal availability</option>
            <option value="linear">linear</option>
          </select>
        </div>
        {field(
          'try-start',
          'Soil water before January, mm',
          start,
          setStart,
          'Empty: the year is repeated until it agrees with itself.',
        )}
      </div>
      <ScrollBox label="Twelve months to type or paste">
        <table className="tbl tbl-tight">
          <caption className="sr-only">
            Twelve months; a row pasted into one cell fills the months after it
          </caption>
          <thead>
            <tr>
              <th scope="col">mm a month</th>
              {monthNames.map((month) => (
                <th key={month} scope="col" className="!text-center">
                  {month}
                </th>
              ))}
            </tr>
          </thead>
          <tbody>
            {rows.map(([name, label]) => (
              <tr key={name}>
                <th scope="row">{label}</th>
                {monthNames.map((month, index) => (
                  <td key={month} className="!px-0.5">
                    <input
                      className="input !min-h-11 !px-1 text-right min-w-[58px]"
                      aria-label={`${label}, ${month}`}
                      value={typed[name][index]}
                      onChange={(event) => put(name, index, event.target.value)}
                    />
                  </td>
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </ScrollBox>
      <div aria-live="polite">
        {answer.problems && (
          <div className="box box-error">
            <p className="font-semibold">
              {answer.problems.length === 1
                ? '1 answer needs another look'
                : `${answer.problems.length} answers need another look`}
            </p>
            <ul className="list-disc pl-5">
              {answer.problems.slice(0, 8).map((problem) => (
                <li key={problem}>{problem}</li>
              ))}
            </ul>
          </div>
        )}
      </div>
      {answer.result && !answer.problems && (
        <>
          <ScrollBox label="Every term of the twelve months">
            <table className="tbl tbl-tight">
              <caption className="sr-only">Every term of the twelve months, mm</caption>
              <thead>
                <tr>
                  <th scope="col">mm a month</th>
                  {monthNames.map((month) => (
                    <th key={month} scope="col" className="r">
                      {month}
                    </th>
                  ))}
                  <th scope="col" className="r">
                    Year
                  </th>
                </tr>
              </thead>
              <tbody>
                {terms.map(([key, label, decimals]) => {
                  const values = answer.result.months.map((month) => month[key]);
                  const isFlow = key !== 'storeMm' && key !== 'apwlMm';
                  return (
                    <tr key={key}>
                      <th scope="row">{label}</th>
                      {values.map((value, index) => (
                        <td key={index} className="r">
                          {value === null ? '–' : formatNumber(value, decimals)}
                        </td>
                      ))}
                      <td className="r font-semibold">
                        {isFlow
                          ? formatNumber(
                              values.reduce<number>((sum, value) => sum + (value ?? 0), 0),
                              decimals,
                            )
                          : ''}
                      </td>
                    </tr>
                  );
                })}
              </tbody>
            </table>
          </ScrollBox>
          <p className="hint">
            Soil water before January: {formatNumber(answer.result.startMm, 2)} mm
            {answer.result.cycleCount
              ? `, after ${counted(answer.result.cycleCount, 'repeated year', 'repeated years')}`
              : ''}
            . Rain − runoff − evapotranspiration − change − percolation is at most{' '}
            {formatExponent(Math.max(...answer.result.months.map((month) => Math.abs(month.residualMm))))} mm
            in any month. Nothing here is stored.
          </p>
        </>
      )}
    </div>
  );
}
