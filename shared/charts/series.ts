/** Colour, dash and mark of each series: the same meaning on every page, in the workbook and in print. */
export const seriesLooks = {
  rain: { colour: '#214093', dash: [], mark: false as const },
  runoff: { colour: '#5991ab', dash: [8, 3], mark: 'triangle' },
  evapotranspiration: { colour: '#55580e', dash: [3, 3], mark: 'triangle' },
  storage: { colour: '#7e55df', dash: [12, 3, 3, 3], mark: 'rectRot' },
  predicted: { colour: '#3e290f', dash: [7, 4], mark: 'rect' },
  pumped: { colour: '#c46f30', dash: [], mark: 'circle' },
  effluent: { colour: '#077468', dash: [], mark: 'rect' },
  limit: { colour: '#840d34', dash: [], mark: false as const },
} as const;
export type Series = keyof typeof seriesLooks;

export const chartInk = { text: '#1f1a26', muted: '#575062', line: '#c8c5d2', surface: '#ffffff' } as const;
