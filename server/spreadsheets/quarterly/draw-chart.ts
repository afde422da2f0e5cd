import { createRequire } from 'node:module';
import { createCanvas, GlobalFonts } from '@napi-rs/canvas';
import { Chart, registerables, type ChartConfiguration } from 'chart.js';
import { chartInk } from '#shared/charts/series.ts';

const scale = 2;
const require = createRequire(import.meta.url);
Chart.register(...registerables);
for (const weight of [400, 600])
  GlobalFonts.registerFromPath(
    require.resolve(`@fontsource/work-sans/files/work-sans-latin-${weight}-normal.woff2`),
    'Work Sans',
  );

/** Draws the chart of the screen on white, as a PNG at twice its size. @param widthPx @param heightPx size on the sheet */
export function drawChart(
  config: ChartConfiguration<'line', (number | null)[], string>,
  { widthPx, heightPx }: { widthPx: number; heightPx: number },
): Buffer {
  const canvas = createCanvas(widthPx, heightPx);
  const ground = {
    id: 'ground',
    beforeDraw: ({ ctx }: Chart) => {
      ctx.fillStyle = chartInk.surface;
      ctx.fillRect(0, 0, widthPx, heightPx);
    },
  };
  // Chart.js writes the size of the page into the style of a canvas; this one stands in no page.
  Object.assign(canvas, { style: {} });
  const chart = new Chart(
    canvas as never,
    {
      ...config,
      options: { ...config.options, responsive: false, devicePixelRatio: scale },
      plugins: [ground],
    } as ChartConfiguration,
  );
  const png = canvas.toBuffer('image/png');
  chart.destroy();
  return png;
}
