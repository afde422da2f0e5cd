/** A small seeded generator (mulberry32): the same seed gives the same demo on every machine. */
export function createRandom(seed: number) {
  let state = seed >>> 0;
  const next = (): number => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed = (mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61)) ^ mixed;
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4_294_967_296;
  };
  return {
    next,
    between: (low: number, high: number) => low + (high - low) * next(),
    /** Normal value by Box–Muller. */
    normal: (mean: number, deviation: number) =>
      mean + deviation * Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next()),
    /** Ids in the form of a UUID, from the same stream. */
    id: (): string => {
      const hex = Array.from({ length: 32 }, () => Math.floor(next() * 16).toString(16));
      hex[12] = '7';
      hex[16] = '89ab'[Math.floor(next() * 4)]!;
      return `${hex.slice(0, 8).join('')}-${hex.slice(8, 12).join('')}-${hex.slice(12, 16).join('')}-${hex.slice(16, 20).join('')}-${hex.slice(20).join('')}`;
    },
  };
}
export type Random = ReturnType<typeof createRandom>;
