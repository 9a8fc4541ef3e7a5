import { readFileSync } from 'node:fs';
import { expect, it } from 'vitest';
import { jsonSchemas } from '../../analysis/sheet/jsonSchema.ts';

it.each(jsonSchemas)(
  '$file is what the zod schema says (npm run schemas writes it anew)',
  ({ file, schema }) => {
    expect(JSON.parse(readFileSync(file, 'utf8'))).toEqual(JSON.parse(JSON.stringify(schema())));
  },
);
