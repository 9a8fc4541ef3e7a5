import { z } from 'zod';
import { resultSchema } from './result.ts';
import { sheetSchema } from './sheet.ts';

/** JSON Schema (draft 2020-12) of what the contract's files may hold, for other programs; generated from the zod schemas. */
export const jsonSchemas: readonly { readonly file: string; readonly schema: () => unknown }[] = [
  {
    file: 'analysis/sheet/sheet.schema.json',
    schema: () => titled('Tetherfall sheet', z.toJSONSchema(sheetSchema, { io: 'input' })),
  },
  {
    file: 'analysis/sheet/result.schema.json',
    schema: () => titled('Tetherfall result', z.toJSONSchema(resultSchema, { io: 'output' })),
  },
];

function titled(title: string, schema: object): object {
  return { title, ...schema };
}
