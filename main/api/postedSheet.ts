import { z } from 'zod';
import type { SheetInput } from '../../analysis/sheet/sheet.ts';

/** A sheet in a request: only that it is there. parseSheet judges it, with lines made for the technician. */
export const postedSheet = z.custom<SheetInput>(
  (value) => typeof value === 'object' && value !== null,
  'must be a sheet',
);
