import { getCollection } from 'astro:content';
import { formSchema, type Form } from '../../commission/pricing/form';

/** All forms of the catalogue, each a valid form; a broken file stops the build with its name. */
export async function readForms(): Promise<Form[]> {
  const entries = await getCollection('forms');
  return entries.map(({ id, data }) => {
    const parsed = formSchema.safeParse(data);
    if (!parsed.success) throw new Error(`src/content/forms/${id}.json is not a form: ${parsed.error.message}`);
    return parsed.data;
  });
}
