/** Why a cell was pumped less than predicted: common practice, no source. */
const pumpedLess = [
  'waste storage filling (young cell)',
  'cover storage filling',
  'frozen ground or snow store',
  'pump or level control down',
  'tank full, pumps interlocked',
  'clogged drain or perched leachate',
  'side-slope seep lost or pumped elsewhere',
  'evaporation or sprayed leachate',
  'volume metered elsewhere',
  'register stuck or reading low',
  'cover placed earlier than recorded',
] as const;

/** Why a cell was pumped more than predicted: common practice, no source. */
const pumpedMore = [
  'storm water run-on or berm overtopped',
  'open area larger than recorded',
  'melt of stored snow',
  'return unmetered or counted twice',
  'condensate, wash water or tank-farm rain',
  'neighbour cell on a shared header',
  'groundwater or consolidation water',
  'waste with free moisture',
  'register reading high or wrong multiplier',
  'return beyond what the cell absorbs',
] as const;

/** Causes an engineer picks from, the likely side first. @param differenceM3 measured − predicted */
export function causesFor(differenceM3: number | null): { title: string; causes: readonly string[] }[] {
  const less = { title: 'Pumped less than predicted', causes: pumpedLess };
  const more = { title: 'Pumped more than predicted', causes: pumpedMore };
  const either = {
    title: 'Either',
    causes: ['runoff coefficient', 'climate record', 'leak or seep', 'other'],
  };
  return (differenceM3 ?? 0) < 0 ? [less, more, either] : [more, less, either];
}
