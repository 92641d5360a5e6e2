import { act, screen } from '@testing-library/react';
import { hydrateRoot } from 'react-dom/client';
import { renderToString } from 'react-dom/server';
import { vi } from 'vitest';
import type { EstimateFields } from '../../../src/commission/pricing/estimate-fields';
import { reckon } from '../../../src/commission/pricing/price-view';
import { rangeWords } from '../../../src/commission/pricing/shown-price';
import { PricePage } from '../../../src/components/quote/PricePage';
import { formChoices, readPriceQuery } from '../../../src/components/quote/price-start';
import { card, forms } from '../../commission/card';

const countries = [
  { code: 'DE', name: 'Germany' },
  { code: 'GB', name: 'United Kingdom' },
];

const plates = Object.fromEntries(forms.map(({ slug, summary, drawing }) => [slug, { summary, drawing }]));

/** Answers what the price page asks of its own site: the rate card, plates, this browser's files. */
export function answerPage(answers: Record<string, unknown> = {}): void {
  const known: Record<string, unknown> = { '/api/rates/card': card, '/forms/plates.json': plates, ...answers };
  vi.stubGlobal('fetch', async (path: string) =>
    Response.json(known[path] ?? null, { status: path in known ? 200 : 404 }),
  );
}

/** The page as the server draws it for a query. */
export function drawnPage(query: string) {
  const start = readPriceQuery(new URLSearchParams(query), card, 'flat-axe');
  if ('goTo' in start) throw new Error(`the query leads to ${start.goTo}`);
  const form = forms.find(({ slug }) => slug === start.view.choices.form?.slug);
  const plate = form ? { slug: form.slug, plate: { summary: form.summary, drawing: form.drawing } } : null;
  return <PricePage start={start} forms={formChoices(forms)} countries={countries} plate={plate} />;
}

/** Puts the server's page on the screen, lets somebody type, then lets the scripts take over, as a browser does. */
export async function openPage(query: string, before?: (page: HTMLElement) => void): Promise<void> {
  window.history.replaceState(null, '', `/price?${query}`);
  const page = document.createElement('div');
  document.body.append(page);
  const drawn = drawnPage(query);
  page.innerHTML = renderToString(drawn);
  page.querySelectorAll('select').forEach(chooseMarked);
  before?.(page);
  await act(async () => {
    hydrateRoot(page, drawn);
  });
  await screen.findByRole('link', { name: /weeks/ });
}

/** The option marked `selected` in the markup, as browsers choose it; happy-dom takes another one. */
function chooseMarked(select: HTMLSelectElement): void {
  const marked = [...select.options].find((option) => option.hasAttribute('selected'));
  if (marked) select.value = marked.value;
}

/** The range in the panel. */
export const shownRange = () => document.querySelector('.price-range')?.textContent;

/** The range the server would answer for these inputs. */
export function rangeFor(fields: EstimateFields): string {
  const outcome = reckon(fields, card);
  if (!outcome.ok) throw new Error(outcome.problem.message);
  return rangeWords(outcome.value);
}
