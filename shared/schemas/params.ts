import * as z from 'zod';
import { isDay } from '../calendar/day.ts';
import { isMonth } from '../calendar/month.ts';
import { recordId } from './text.ts';

/** Parameters of the API's addresses. */
export const siteParams = z.object({ siteId: recordId });
export const siteRecordParams = z.object({ siteId: recordId, id: recordId });
export const siteMonthParams = z.object({ siteId: recordId, month: z.string().refine(isMonth) });
export const siteDayParams = z.object({ siteId: recordId, day: z.string().refine(isDay) });
export const siteQuarterParams = z.object({ siteId: recordId, quarter: z.string().regex(/^\d{4}-Q[1-4]$/) });
