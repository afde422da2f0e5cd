/** A CAS registry number as a sheet gives it. */
export interface CasReading {
  cas: string;
  /** How it was read where the sheet does not print it so; null where it does. */
  howRead: string | null;
}

/**
 * The last digit of a CAS registry number: the digits before it, counted from the right, each times its place, modulo 10.
 * @example hasCasCheckDigit('7440-66-6') // true
 * @source CAS registry number verification, CAS, a division of the American Chemical Society (rule from memory)
 */
export function hasCasCheckDigit(cas: string): boolean {
  const digits = [...cas.replaceAll('-', '')].map(Number);
  const check = digits.pop();
  return digits.reverse().reduce((sum, digit, index) => sum + digit * (index + 1), 0) % 10 === check;
}

const monthNames = ['jan', 'feb', 'mar', 'apr', 'may', 'jun', 'jul', 'aug', 'sep', 'oct', 'nov', 'dec'];
const pad = (value: number) => String(value).padStart(2, '0');
const made = (head: string, middle: string, check: string) => `${head.replace(/^0+/, '')}-${middle}-${check}`;

/** The number that a spreadsheet took for a date: year, month and day in the places of its three parts. */
function fromDate(text: string): string | null {
  const iso = /^(?:19|20)?(\d{2})-(\d{2})-0?(\d)(?:[ T]00:00(?::00)?)?$/.exec(text);
  if (iso && /^(19|20)/.test(text)) return made(iso[1]!, iso[2]!, iso[3]!);
  const named = /^0?(\d)[-\s./]([A-Za-z]{3})[a-z]*[-\s./](?:19|20)?(\d{2})$/.exec(text);
  const month = named ? monthNames.indexOf(named[2]!.toLowerCase()) + 1 : 0;
  return named && month ? made(named[3]!, pad(month), named[1]!) : null;
}

/**
 * Reads a CAS number, also without its hyphens, padded with zeros, or turned into a date by a spreadsheet; what is not
 * printed as one is taken only when its check digit fits.
 * @returns null when the text is none
 */
export function readCas(text: string): CasReading | null {
  const tidy = text.trim();
  const printed = /^(\d{2,10})-(\d{2})-(\d)$/.exec(tidy);
  if (printed) {
    const cas = made(printed[1]!, printed[2]!, printed[3]!);
    if (!hasCasCheckDigit(cas)) return null;
    return {
      cas,
      howRead: cas === tidy ? null : `CAS number "${tidy}" read as ${cas}, without its padding.`,
    };
  }
  const bare = /^0*(\d{2,7})(\d{2})(\d)$/.exec(tidy);
  const cas = bare ? made(bare[1]!, bare[2]!, bare[3]!) : fromDate(tidy);
  if (cas === null || !hasCasCheckDigit(cas)) return null;
  return {
    cas,
    howRead: bare
      ? `CAS number "${tidy}" read as ${cas}: its check digit fits.`
      : `CAS number "${tidy}" was turned into a date by a spreadsheet; read as ${cas}: its check digit fits.`,
  };
}
