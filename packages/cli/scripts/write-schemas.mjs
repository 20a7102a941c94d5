/** Writes docs/schemas from the readers of documents (after a build); a test keeps the two the same. */
import { writeFileSync } from 'node:fs';
import { z } from 'zod';
import { fitSchema } from '../dist/fit-reader.js';
import { profileSchema } from '../dist/profile-reader.js';

for (const [name, schema] of Object.entries({ 'profile-1': profileSchema, 'fit-1': fitSchema }))
  writeFileSync(new URL(`../../../docs/schemas/${name}.json`, import.meta.url), `${JSON.stringify(z.toJSONSchema(schema), null, 2)}\n`);
