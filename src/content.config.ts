import { defineCollection } from 'astro:content';
import { glob } from 'astro/loaders';
import { z } from 'astro/zod';

/** The catalogue's files as they stand; `components/catalogue/read-forms` parses each with the form's own schema. */
const forms = defineCollection({
  loader: glob({ pattern: '*.json', base: './src/content/forms' }),
  schema: z.object({ slug: z.string() }).passthrough(),
});

export const collections = { forms };
