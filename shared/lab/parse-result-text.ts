/** What the text of a result says. Values stay text, so that 1.20 keeps its last digit. */
export type ResultText =
  | {
      kind: 'value';
      comparator: '=' | '>' | '~';
      valueText: string;
      qualifier: string | null;
      isGroupedOrDecimal: string | null;
    }
  | { kind: 'below'; limitText: string | null; qualifier: string | null; isGroupedOrDecimal: string | null }
  | { kind: 'missing'; reason: string }
  | { kind: 'question'; sentence: string };

const missingReasons: Record<string, string> = {
  '': 'not given',
  '-': 'not given',
  '--': 'not given',
  '—': 'not given',
  'n/a': 'not applicable',
  na: 'not applicable',
  ns: 'not sampled',
  nt: 'not tested',
  nr: 'not reported',
  pending: 'pending',
  broken: 'sample broken',
  insufficient: 'too little sample',
  'not analyzed': 'not tested',
  'not analysed': 'not tested',
};

const number = String.raw`(\d[\d.,\s]*|\.\d+)`;
const notDetected = /^(nd|n\.d\.?|n\.n\.?|bdl|bql|bld|<\s*mdl|<\s*rl|<\s*loq|none detected|not detected)$/;
const notDetectedWithLimit = new RegExp(
  String.raw`^(?:nd|n\.d\.?|bdl|bql|not detected)\s*[(@<]\s*<?\s*${number}\s*\)?$`,
  'i',
);

/** Number text with one decimal mark; the other reading of "1,250" is given so that siblings can decide. */
function tidyNumber(text: string): { valueText: string; other: string | null } | null {
  const plain = text.replace(/[\s\u00a0\u2009\u202f]/g, '');
  if (/^\d+$/.test(plain) || /^\d*\.\d+$/.test(plain))
    return { valueText: plain.startsWith('.') ? `0${plain}` : plain, other: null };
  if (/^\d{1,3}(,\d{3})+\.\d+$/.test(plain)) return { valueText: plain.replaceAll(',', ''), other: null };
  if (/^\d{1,3}(\.\d{3})+,\d+$/.test(plain))
    return { valueText: plain.replaceAll('.', '').replace(',', '.'), other: null };
  if (/^\d{1,3}(,\d{3}){2,}$/.test(plain)) return { valueText: plain.replaceAll(',', ''), other: null };
  if (/^[1-9]\d{0,2},\d{3}$/.test(plain))
    return { valueText: plain.replace(',', ''), other: plain.replace(',', '.') };
  if (/^\d+,\d+$/.test(plain)) return { valueText: plain.replace(',', '.'), other: null };
  return null;
}

/**
 * Reads the text of a result by the grammar for values below detection; nothing becomes 0.
 * @param text as in the cell, spaces of any kind
 * @returns a value, a value below a limit, a missing reason, or a question
 * @source rules common to all sheets, 5 and 7
 */
export function parseResultText(text: string): ResultText {
  const tidy = text
    .replace(/[\u00a0\u2009\u202f]/g, ' ')
    .replace(/＜/g, '<')
    .trim();
  const lower = tidy.toLowerCase();
  if (lower in missingReasons) return { kind: 'missing', reason: missingReasons[lower]! };
  if (notDetected.test(lower))
    return { kind: 'below', limitText: null, qualifier: null, isGroupedOrDecimal: null };
  const within = notDetectedWithLimit.exec(lower);
  if (within) {
    const limit = tidyNumber(within[1]!);
    return {
      kind: 'below',
      limitText: limit?.valueText ?? null,
      qualifier: null,
      isGroupedOrDecimal: limit?.other ?? null,
    };
  }
  if (lower === 'trace')
    return {
      kind: 'question',
      sentence: 'The laboratory says "Trace". Enter a value with its limit, or leave the row held.',
    };
  if (lower === 'tntc')
    return {
      kind: 'question',
      sentence: 'The laboratory says "too numerous to count". Enter the upper count, or leave the row held.',
    };
  if (/^[-−]\s*\d/.test(tidy))
    return {
      kind: 'question',
      sentence: `"${tidy}" is below 0. Some laboratories print a limit that way: is it below ${tidy.replace(/^[-−]\s*/, '')}?`,
    };
  const match =
    new RegExp(String.raw`^(<|>|~|≈)?\s*${number}\s*(?:\*?\s*([A-Za-z]{1,3}))?\*?$`).exec(tidy) ??
    new RegExp(String.raw`^(U)\s+${number}$`).exec(tidy);
  const read = match && tidyNumber(match[2]!);
  if (!match || !read)
    return {
      kind: 'question',
      sentence: `"${tidy}" could not be read as a result. Correct it, or leave the row held.`,
    };
  const [, sign, , letters = null] = match;
  const qualifier = letters?.toUpperCase() ?? null;
  if (sign === '<')
    return { kind: 'below', limitText: read.valueText, qualifier, isGroupedOrDecimal: read.other };
  if (sign === 'U')
    return { kind: 'below', limitText: read.valueText, qualifier: 'U', isGroupedOrDecimal: read.other };
  return {
    kind: 'value',
    comparator: sign === '>' ? '>' : sign === '~' || sign === '≈' ? '~' : '=',
    valueText: read.valueText,
    qualifier,
    isGroupedOrDecimal: read.other,
  };
}
