import type { APIRoute } from 'astro';
import { readForms } from '../../components/catalogue/read-forms';

/** Words and drawing of every form, for the price page when another form is chosen there. */
export const GET: APIRoute = async () => {
  const forms = await readForms();
  const plates = forms.map(({ slug, summary, drawing }) => [slug, { summary, drawing }] as const);
  return Response.json(Object.fromEntries(plates));
};
