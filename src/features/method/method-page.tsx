import balanceCases from '#data/published/balance-cases.json';
import hydrologyCases from '#data/published/hydrology-cases.json';
import {
  computePublishedCases,
  computePublishedValues,
  type PublishedCase,
} from '#shared/method/published-cases.ts';
import { engineVersion } from '#shared/water-balance/engine-input.ts';
import { PageHead, Section } from '../../components/page.tsx';
import { formatNumber } from '../../lib/format-quantity.ts';
import { CaseTable, largestDifference, ValueTable } from './case-table.tsx';
import { TryBalanceForm } from './try-balance-form.tsx';

const cases = computePublishedCases(balanceCases as PublishedCase[]);
const values = computePublishedValues(
  hydrologyCases as unknown as Parameters<typeof computePublishedValues>[0],
);
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
    'Rain and snow',
    'Monthly precipitation; snow below a temperature and rain above another, linear between; melt in proportion to the warmth (McCabe and Markstrom 2007, USGS OFR 2007-1088; equations from memory).',
  ],
  [
    'Potential evapotranspiration',
    'Thornthwaite 1948, or Hargreaves–Samani 1985 as FAO-56 eq. 52, or given. Thornthwaite tends to be low.',
  ],
  [
    'Runoff',
    'A share of rain and melt by cover and season (Fenn, Hanley and DeGeare 1975, Table 3; from memory). Runoff of an open working area is contact water and goes to leachate.',
  ],
  [
    'Soil of the cover',
    'Thornthwaite and Mather 1957: the store dries by the exponential law and percolates above the available water.',
  ],
  ['Through a membrane', 'An entered fraction of what reaches it; the rest drains off above it.'],
  [
    'Waste',
    'Placed waste takes up water to field capacity; what drains follows a linear reservoir. The recession constant 0.5 a month is our choice: no published constant exists.',
  ],
  [
    'Liner',
    'An entered share of what drains is counted as leaked. Head and leakage are design checks, not a proof that a liner is sound.',
  ],
  ['Left out', 'Biochemical gain or loss of water is neglected.'],
];

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
      {cases.map((one) => (
        <CaseTable key={one.id} one={one} />
      ))}
      <Section title="Single values">
        <ValueTable values={values} />
      </Section>
      <Section title="Try a balance" aside="one soil cover, twelve months; nothing is stored" id="try">
        <TryBalanceForm first={first} />
      </Section>
      <Section title="What is computed">
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
