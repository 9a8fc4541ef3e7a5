import { writeFileSync } from 'node:fs';
import { jsonSchemas } from '../../analysis/sheet/jsonSchema.ts';

// `npm run schemas`: writes the JSON Schemas anew after a change of the zod schemas.
for (const { file, schema } of jsonSchemas) writeFileSync(file, `${JSON.stringify(schema(), null, 2)}\n`);
