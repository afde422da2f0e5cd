// A thread starts as plain JavaScript: the loader of TypeScript does not reach into threads by itself.
import { tsImport } from 'tsx/esm/api';

const worker = await tsImport('./model-worker.ts', import.meta.url);

export const calibrateCell = worker.calibrateCell;
export const drawSpan = worker.drawSpan;
