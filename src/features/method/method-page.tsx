import balanceCases from '#data/published/balance-cases.json';
import hydrologyCases from '#data/published/hydrology-cases.json';
import { computePublishedCases, type PublishedCase } from '#shared/method/published-cases.ts';
import { computeLinerValues } from '#shared/method/liner-values.ts';
import { computePublishedValues } from '#shared/method/published-values.ts';
import { engineVersion } from '#shared/water-balance/engine-input.ts';
import { PageHead, Section } from '../../components/page.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { CaseTable, largestDifference, ValueTable } from './case-table.tsx';
import { TryBalanceForm } from './try-balance-form.tsx';

const cases = computePublishedCases(balanceCases as PublishedCase[]);
const values = computePublishedValues(
  hydrologyCases as unknown as Parameters<typeof computePublishedValues>[0],
);
const linerValues = computeLinerValues(balanceCases as unknown as PublishedCase[]);
const cincinnati = (balanceCases as PublishedCase[]).find((one) => one.id === 'fenn1975-cincinnati')!;
const texts = (name: string) => (cincinnati.inputs[name] as number[]).map(String);
const first = {
  precipitationMm: texts('p_mm'),
  petMm: texts('pet_mm'),
  runoffCoefficient: texts('runoff_coefficient'),
  capacity: '150',
};

const method = [
  [
    'What is balanced',
    'Each plot, by steps of a month under one cover: snow, soil, cover, waste and drain each close by a line of their own, every term by its own formula, to a billionth of what it adds up. A step that does not close gives no result. Leachate at the sump is what is collected over the liner and the runoff that is contact water.',
  ],
  [
    'Rain and snow',
    'Monthly: snow below a temperature and rain above another, linear between; melt in proportion to the warmth (McCabe and Markstrom 2007, USGS OFR 2007-1088; equations from memory). With daily temperatures: snow at or below freezing, melt by degree-days (USDA-NRCS NEH-630 ch. 11, second-hand).',
  ],
  [
    'Potential evapotranspiration',
    'Thornthwaite 1948; Hargreaves–Samani 1985 as FAO-56 eq. 52; Penman–Monteith, FAO-56 eq. 6, monthly or daily, with what is missing by its chapter 3 and each substitution said; pan × coefficient; or given. Thornthwaite tends to be low. Available water and method belong together: look at both when one changes.',
  ],
  [
    'Runoff',
    'A share of rain and melt by cover and season (Fenn, Hanley and DeGeare 1975, Table 3; from memory), or the curve number on each day’s rain with the five days before (TR-55, NEH-630 ch. 10), never on a month’s total; melt keeps the share. Runoff of an open working area is contact water and goes to leachate.',
  ],
  [
    'Soil of the cover',
    'Thornthwaite and Mather 1957: the store dries by the exponential law and percolates above the available water. Labelled alternatives: equal availability, linear withdrawal. The first store is spun up on the first year. Frozen months, where a site sets them, percolate nothing. A balance of average months understates percolation against the mean of yearly balances.',
  ],
  [
    'Through a membrane',
    'An entered fraction of what reaches it, or leakage through defects (Giroud 1997, from memory) with the head in the cover’s own drain; the rest drains off above it.',
  ],
  [
    'Waste',
    'Placed waste takes up water to field capacity; what drains follows a linear reservoir. The recession constant 0.5 a month is our choice: no published constant exists.',
  ],
  [
    'Liner',
    'An entered share of what drains is counted as leaked, or leakage through defects by the head: the measured mean of the month, else the steady maximum by Giroud et al. 2000, an upper estimate, beside McEnroe 1993. Head and leakage are design checks, not a proof that a liner is sound.',
  ],
  ['Left out', 'Biochemical gain or loss of water is neglected.'],
];

const parts = [
  ['try', 'Try a balance'],
  ['values', 'Single values'],
  ['liner', 'Liner and waste'],
  ['computed', 'What is computed'],
] as const;

/** How it is computed, checked against published examples in this browser; and a balance to try. */
export function MethodPage() {
  const worst = cases.map((one) => ({ one, ...largestDifference(one) }));
  return (
    <>
      <PageHead
        title="Method, checked against published cases"
        crumb={`Engine version ${engineVersion}`}
        sentence={`Computed in this browser just now. ${worst.map(({ one, differs, unit }) => `${one.title.split(/[,:(]/)[1]?.trim() ?? one.title}: largest difference ${formatNumber(differs, differs < 0.01 ? 4 : 2)}${unit ? ` ${unit}` : ''}`).join('; ')}.`}
      />
      <nav aria-label="Parts of this page" className="flex flex-wrap gap-x-5 gap-y-2 mb-6 no-print">
        {parts.map(([id, name]) => (
          <a key={id} href={`#${id}`} className="link inline-flex items-center min-h-6">
            {name}
          </a>
        ))}
      </nav>
      {cases.map((one) => (
        <CaseTable key={one.id} one={one} />
      ))}
      <Section title="Single values" id="values">
        <ValueTable label="Single published values" values={values} />
      </Section>
      <Section
        title="Liner and waste"
        id="liner"
        aside="figures computed from the formulas elsewhere; no worked example of their authors could be read"
      >
        <ValueTable label="Values of liner and waste formulas" values={linerValues} />
      </Section>
      <Section title="Try a balance" aside="one soil cover, twelve months; nothing is stored" id="try">
        <TryBalanceForm first={first} />
      </Section>
      <Section title="What is computed" id="computed">
        <dl className="sheet pad grid gap-x-6 gap-y-3 md:grid-cols-[220px_1fr]">
          {method.map(([name, words]) => (
            <div key={name} className="contents">
              <dt className="font-semibold">{name}</dt>
              <dd>{words}</dd>
            </div>
          ))}
        </dl>
        <p className="hint mt-3">
          Every step of every plot closes to 1e-9 of its terms, or there is no result. Local rules and the
          permit win over every number here.
        </p>
      </Section>
    </>
  );
}
