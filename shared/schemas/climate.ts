import * as z from 'zod';
import { climateFields, climateUnitNames, type ClimateUnit } from '../climate/read-climate-sheet.ts';
import { monthText } from './days.ts';
import { optionalId, recordId, requiredText } from './text.ts';

const columnIndex = z.number().int().min(0).max(199).nullable();

export const climateMappingInput = z.object({
  sheetName: z.string(),
  headerRow: z.number().int().min(0),
  kind: z.enum(['daily', 'monthly']),
  dateColumn: columnIndex,
  yearColumn: columnIndex,
  monthColumn: columnIndex,
  columns: z
    .array(
      z.object({
        field: z.enum(climateFields),
        column: z.number().int().min(0).max(199),
        unit: z.enum(Object.keys(climateUnitNames) as [ClimateUnit, ...ClimateUnit[]]),
      }),
    )
    .min(1, 'Choose at least one column to read.'),
});

export const climateUploadInput = z.object({
  id: recordId,
  stationName: requiredText('the name of the station', 80),
});
export const gapChoiceInput = z.object({
  id: recordId,
  month: monthText,
  choice: z.enum(['leave-out', 'scale-by-days', 'other-station', 'station-normal'], {
    error: 'Choose what to do about the missing days.',
  }),
  otherStationId: optionalId,
  reason: requiredText('the reason', 500),
});
