import { availableParallelism } from 'node:os';
import { fileURLToPath } from 'node:url';
import { Piscina } from 'piscina';
import type { Calibration } from '#shared/calibration/calibrate.ts';
import type { Members } from '#shared/forecast/draw-members.ts';
import type { CalibrationTask, SpanTask } from './model-worker.ts';

/** Long computations of the model, in threads of their own; a call that is aborted stops its thread. */
export interface ModelPool {
  threadCount: number;
  calibrate: (task: CalibrationTask) => Promise<Calibration>;
  drawSpan: (span: SpanTask, signal?: AbortSignal) => Promise<Members>;
  close: () => Promise<void>;
}

/** @param threadCount at most; threads start when there is work and end when there is none for a while */
export function createModelPool(threadCount = availableParallelism()): ModelPool {
  const pool = new Piscina({
    filename: fileURLToPath(new URL('./start-worker.mjs', import.meta.url)),
    execArgv: [],
    minThreads: 0,
    maxThreads: threadCount,
    idleTimeout: 20_000,
  });
  // A thread that dies fails its own call; without a listener it would take the server along.
  pool.on('error', () => undefined);
  return {
    threadCount,
    calibrate: (task) => pool.run(task, { name: 'calibrateCell' }) as Promise<Calibration>,
    drawSpan: (span, signal) =>
      pool.run(span, { name: 'drawSpan', ...(signal ? { signal } : {}) }) as Promise<Members>,
    close: () => pool.destroy(),
  };
}
