import type { BalanceGroup } from '#shared/views/balance-view.ts';
import { ScrollBox } from '../../components/page.tsx';
import { formatM3, formatMm, formatSigned, formatPercent } from '../../lib/format-quantity.ts';

interface Bar {
  name: string;
  valueM3: number;
  colour: string;
  isDashed?: boolean;
}

/** The terms of the head line in order; what is zero is left out of the line, never out of the table. */
function headTerms({ headLine: h }: BalanceGroup): (Bar & { sign: '+' | '−' | '=' })[] {
  const out = h.intoStorageM3 < 0;
  return [
    { sign: '+', name: 'Rain', valueM3: h.rainM3, colour: 'var(--color-s-rain)' },
    {
      sign: h.otherInM3 < 0 ? '−' : '+',
      name: h.otherInM3 < 0 ? 'Left with the old soil' : 'Other water in',
      valueM3: Math.abs(h.otherInM3),
      colour: h.otherInM3 < 0 ? 'var(--color-s-runoff)' : 'var(--color-s-rain)',
    },
    { sign: '−', name: 'Runoff away', valueM3: h.runoffM3, colour: 'var(--color-s-runoff)' },
    { sign: '−', name: 'Evapotranspiration', valueM3: h.evapotranspirationM3, colour: 'var(--color-s-et)' },
    {
      sign: out ? '+' : '−',
      name: out ? 'Out of storage' : 'Into storage',
      valueM3: Math.abs(h.intoStorageM3),
      colour: 'var(--color-s-storage)',
    },
    { sign: '−', name: 'Leaked', valueM3: h.leakedM3, colour: 'var(--color-s-limit)' },
  ];
}

export function HeadLine({ group }: { group: BalanceGroup }) {
  const terms = headTerms(group).filter((term) => Math.abs(term.valueM3) > 1e-9);
  const gap = group.pumpedM3 === null ? null : group.pumpedM3 - group.headLine.leachateM3;
  return (
    <div className="sheet pad flex flex-wrap gap-x-5 gap-y-4 items-start">
      {terms.map((term, index) => (
        <span key={term.name} className="flex items-start gap-4">
          {(index > 0 || term.sign === '−') && (
            <span aria-hidden className="text-xl text-muted">
              {term.sign}
            </span>
          )}
          <span>
            <span className="sr-only">{term.sign === '−' ? 'minus ' : index > 0 ? 'plus ' : ''}</span>
            <span className="text-xl md:text-2xl block leading-tight">{formatM3(term.valueM3)}</span>
            <span className="hint">{term.name}</span>
          </span>
        </span>
      ))}
      <span className="flex items-start gap-4">
        <span aria-hidden className="text-xl text-muted">
          =
        </span>
        <span>
          <span className="sr-only">equals </span>
          <span className="text-xl md:text-2xl block leading-tight font-semibold">
            {formatM3(group.headLine.leachateM3)}
          </span>
          <span className="hint">Leachate at the sump, m³</span>
        </span>
      </span>
      <p className="md:ml-auto md:border-l border-line md:pl-5 max-w-[26ch]">
        {gap === null ? (
          <>
            <strong>Pumped:</strong> not read.
          </>
        ) : (
          <>
            <strong>Pumped {formatM3(group.pumpedM3!)}.</strong> Gap {formatSigned(gap)} m³
            {group.headLine.leachateM3 > 0
              ? ` (${formatPercent((100 * gap) / group.headLine.leachateM3)})`
              : ''}
            .
          </>
        )}
      </p>
    </div>
  );
}

/** Signed bars from one zero line: each term begins where the last one ended. */
export function SignedBars({ group }: { group: BalanceGroup }) {
  const terms = headTerms(group);
  const signedOf = (term: (typeof terms)[number]) => (term.sign === '+' ? term.valueM3 : -term.valueM3);
  const bars = terms.map((term, index) => {
    const from = terms.slice(0, index).reduce((sum, one) => sum + signedOf(one), 0);
    return { ...term, from, to: from + signedOf(term) };
  });
  const ends = [
    ...bars.map((bar) => Math.max(bar.from, bar.to)),
    group.headLine.leachateM3,
    group.pumpedM3 ?? 0,
    1,
  ];
  const low = Math.min(0, ...bars.map((bar) => Math.min(bar.from, bar.to)));
  const scale = (value: number) => `${(100 * (value - low)) / (Math.max(...ends) - low)}%`;
  const rows = [
    ...bars.map((bar) => ({ ...bar, shown: bar.sign === '−' ? -bar.valueM3 : bar.valueM3 })),
    {
      name: 'Leachate, predicted',
      from: 0,
      to: group.headLine.leachateM3,
      colour: 'var(--color-s-leachate)',
      isDashed: true,
      shown: group.headLine.leachateM3,
    },
  ];
  if (group.pumpedM3 !== null)
    rows.push({
      name: 'Pumped, metered',
      from: 0,
      to: group.pumpedM3,
      colour: 'var(--color-s-pumped)',
      isDashed: false,
      shown: group.pumpedM3,
    });
  return (
    <ScrollBox label="Where the rain of the month went">
      <table className="tbl">
        <caption className="sr-only">Where the rain of the month went, m³ and mm</caption>
        <thead>
          <tr>
            <th scope="col">Term</th>
            <th scope="col" className="r">
              m³
            </th>
            <th scope="col" className="r">
              mm
            </th>
            <th scope="col" className="min-w-[100px] w-1/2">
              <span className="sr-only">Bar</span>
            </th>
          </tr>
        </thead>
        <tbody>
          {rows.map((row) => (
            <tr key={row.name} className={row.isDashed ? 'total' : ''}>
              <th scope="row">{row.name}</th>
              <td className="r">{formatM3(row.shown)}</td>
              <td className="r">
                {group.meanAreaM2 ? formatMm((row.shown / group.meanAreaM2) * 1000) : '–'}
              </td>
              <td aria-hidden>
                <div className="h-5 border-l border-ink" style={{ marginLeft: scale(0) }} />
                <div className="relative h-5 -mt-5">
                  <div
                    className="absolute h-5"
                    style={{
                      left: scale(Math.min(row.from, row.to)),
                      width: `calc(${scale(Math.max(row.from, row.to))} - ${scale(Math.min(row.from, row.to))})`,
                      background: row.isDashed ? 'transparent' : row.colour,
                      border: row.isDashed ? '2px dashed var(--color-s-leachate)' : undefined,
                    }}
                  />
                </div>
              </td>
            </tr>
          ))}
        </tbody>
      </table>
    </ScrollBox>
  );
}
