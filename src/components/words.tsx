import { AlertTriangle, Check, CircleDashed, CircleHelp, Clock3 } from 'lucide-react';

const looks = {
  good: { className: 'text-done', Icon: Check },
  bad: { className: 'text-error', Icon: AlertTriangle },
  ask: { className: 'text-warn', Icon: CircleHelp },
  open: { className: 'text-muted', Icon: CircleDashed },
  note: { className: 'text-note', Icon: CircleHelp },
  clock: { className: 'text-error', Icon: Clock3 },
} as const;
export type Look = keyof typeof looks;

/** A word of state with its mark; the colour is never the only sign. */
export function Word({ look, children }: { look: Look; children: string }) {
  const { className, Icon } = looks[look];
  return (
    <span className={`word ${className}`}>
      <Icon aria-hidden size={16} className="self-center" />
      {children}
    </span>
  );
}

const verdictLooks: Record<string, Look> = {
  pass: 'good',
  exceed: 'bad',
  incomplete: 'ask',
  'cannot be judged': 'note',
  'no discharge': 'open',
  'not required': 'open',
};

export function VerdictWord({ word }: { word: string }) {
  return <Word look={verdictLooks[word] ?? 'open'}>{word[0]!.toUpperCase() + word.slice(1)}</Word>;
}

const basisShapes: Record<string, string> = {
  measured: '●',
  apportioned: '◐',
  estimated: '◌',
  allocated: '⊕',
  calculated: '□',
};

/** Basis of a number: filled measured, half apportioned, dashed estimated, split allocated, square calculated. */
export function Basis({ basis }: { basis: string }) {
  return (
    <span className="whitespace-nowrap">
      <span aria-hidden className="mr-1.5">
        {basisShapes[basis] ?? '○'}
      </span>
      {basis}
    </span>
  );
}

/** A default that nobody of the site has confirmed yet. */
export function Template() {
  return <span className="template">template</span>;
}
