import { setMaxListeners } from 'node:events';
import type { Members, ForecastTask } from '#shared/forecast/draw-members.ts';
import { summariseMembers, type ForecastSummary } from '#shared/forecast/summarise-members.ts';
import type { ModelPool } from '../../workers/model-pool.ts';

export interface ForecastJob {
  id: string;
  organisationId: string;
  siteId: string;
  state: 'running' | 'done' | 'cancelled' | 'failed';
  doneCount: number;
  wantedCount: number;
  summaries: ForecastSummary[];
  failure: string | null;
  /** What the page shows beside the numbers; kept as it was asked. */
  about: unknown;
}

/** Forecasts that run or ran: for planning only, kept in memory and not in the record. */
export interface ForecastJobs {
  start: (
    job: Pick<ForecastJob, 'id' | 'organisationId' | 'siteId' | 'about'>,
    tasks: readonly ForecastTask[],
    memberCount: number,
  ) => void;
  find: (organisationId: string, siteId: string, id: string) => ForecastJob | null;
  cancel: (job: ForecastJob) => void;
}

const keptMax = 40;
/** Small enough that progress moves and a cancel is felt. */
const spanSize = 25;

export function createForecastJobs(pool: ModelPool): ForecastJobs {
  const jobs = new Map<string, { job: ForecastJob; controller: AbortController }>();

  async function run(
    job: ForecastJob,
    controller: AbortController,
    tasks: readonly ForecastTask[],
    memberCount: number,
  ): Promise<void> {
    for (const [taskIndex, task] of tasks.entries()) {
      const spans = Array.from({ length: Math.ceil(memberCount / spanSize) }, (_, index) => ({
        scenarioId: `${job.id} ${taskIndex}`,
        task,
        from: index * spanSize,
        to: Math.min(memberCount, (index + 1) * spanSize),
      }));
      const parts: Members[] = await Promise.all(
        spans.map(async (span) => {
          const members = await pool.drawSpan(span, controller.signal);
          job.doneCount += span.to - span.from;
          return members;
        }),
      );
      job.summaries.push(summariseMembers(parts, task.monthCount));
    }
    job.state = 'done';
  }

  return {
    start: (about, tasks, memberCount) => {
      const controller = new AbortController();
      // Every span of the forecast listens for the cancel.
      setMaxListeners(0, controller.signal);
      const job: ForecastJob = {
        ...about,
        state: 'running',
        doneCount: 0,
        wantedCount: memberCount * tasks.length,
        summaries: [],
        failure: null,
      };
      jobs.set(job.id, { job, controller });
      for (const id of [...jobs.keys()].slice(0, Math.max(0, jobs.size - keptMax))) jobs.delete(id);
      run(job, controller, tasks, memberCount).catch((error: unknown) => {
        job.state = controller.signal.aborted ? 'cancelled' : 'failed';
        job.failure = error instanceof Error ? error.message : 'The forecast stopped.';
        // The other spans of a failed forecast are of no use.
        controller.abort();
      });
    },
    find: (organisationId, siteId, id) => {
      const job = jobs.get(id)?.job;
      return job?.organisationId === organisationId && job.siteId === siteId ? job : null;
    },
    cancel: (job) => jobs.get(job.id)?.controller.abort(),
  };
}
