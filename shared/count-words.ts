/** A count with its noun. @example counted(1, 'row') // '1 row' @example counted(3, 'entry', 'entries') // '3 entries' */
export const counted = (count: number, one: string, many = `${one}s`): string =>
  `${count} ${count === 1 ? one : many}`;
