/** The fixed clock of tests, pictures and benchmarks; the anchor month of the demo is March 2026. */
export const demoInstant = new Date('2026-03-18T09:30:00Z');
