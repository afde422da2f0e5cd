import {
  CategoryScale,
  Chart,
  Legend,
  LinearScale,
  LineElement,
  PointElement,
  Tooltip,
  type ChartConfiguration,
} from 'chart.js';
import { Line } from 'react-chartjs-2';

Chart.register(CategoryScale, Legend, LinearScale, LineElement, PointElement, Tooltip);

/** A chart with its summary in words; the page holds the table of the same numbers. */
export function LineChart({
  config,
  summary,
}: {
  config: ChartConfiguration<'line', (number | null)[], string>;
  summary: string;
}) {
  return (
    <figure className="sheet pad">
      <div className="h-[320px] relative overflow-hidden">
        <Line data={config.data} options={config.options ?? {}} role="img" aria-label={summary} />
      </div>
      <figcaption className="hint mt-2">{summary}</figcaption>
    </figure>
  );
}
