/** A name as it is compared: letters and digits alone, without case. */
export const tidyName = (text: string): string =>
  text
    .toLowerCase()
    .normalize('NFKD')
    .replace(/[^a-z0-9]+/g, '');

/** Under which a remembered answer of a laboratory is found. */
export const mappingKey = (kind: string, text: string) => `${kind} ${tidyName(text)}`;
