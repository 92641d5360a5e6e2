import { z } from 'zod';
import { currencySchema, formatMoney } from '../../commission/money';

const answerSchema = z.object({
  currency: currencySchema,
  forms: z.record(z.string(), z.object({ fromMinor: z.number().int(), fromWithTaxMinor: z.number().int() })),
  alloys: z.array(
    z.object({ code: z.string(), densityGPerCm3: z.number(), contraction: z.number(), meltLoss: z.number() }),
  ),
});
type Answer = z.infer<typeof answerSchema>;

/** Today's from-prices and alloy settings, or null when they cannot be had: the page then keeps its own words. */
async function fetchFromPrices(): Promise<Answer | null> {
  try {
    const response = await fetch('/api/rates/from-prices', { headers: { accept: 'application/json' } });
    if (!response.ok) return null;
    const parsed = answerSchema.safeParse(await response.json());
    return parsed.success ? parsed.data : null;
  } catch {
    return null;
  }
}

const whole = (minor: number, answer: Answer) => formatMoney(minor, answer.currency, { pence: 'whole' });

function fillForm(element: HTMLElement, answer: Answer) {
  const form = answer.forms[element.dataset.fromPrice ?? ''];
  const words = element.querySelector('[data-words]');
  if (form && words) words.textContent = `From ${whole(form.fromWithTaxMinor, answer)} with VAT`;
}

function fillPanel(panel: HTMLElement, answer: Answer) {
  const form = answer.forms[panel.dataset.fromPanel ?? ''];
  const figure = panel.querySelector('[data-figure]');
  const before = panel.querySelector('[data-before]');
  if (!form || !figure || !before) return;
  figure.textContent = whole(form.fromWithTaxMinor, answer);
  before.textContent = `with VAT (${whole(form.fromMinor, answer)} before), carriage apart`;
  for (const part of panel.querySelectorAll<HTMLElement>('[data-until]')) part.hidden = true;
  for (const part of panel.querySelectorAll<HTMLElement>('[data-when]')) part.hidden = false;
}

function fillAlloy(element: HTMLElement, answer: Answer) {
  const alloy = answer.alloys.find((a) => a.code === element.dataset.alloy);
  if (!alloy) return;
  const percent = (share: number) => `${Math.round(share * 1000) / 10} %`;
  element.textContent = `${alloy.densityGPerCm3} g/cm³, contraction ${percent(alloy.contraction)}, melt loss ${percent(alloy.meltLoss)}`;
}

/** Fills every place of the page that waits for today's rates. */
export async function showFromPrices(root: ParentNode = document): Promise<void> {
  const answer = await fetchFromPrices();
  if (!answer) return;
  root.querySelectorAll<HTMLElement>('[data-from-price]').forEach((element) => fillForm(element, answer));
  root.querySelectorAll<HTMLElement>('[data-from-panel]').forEach((element) => fillPanel(element, answer));
  root.querySelectorAll<HTMLElement>('[data-alloy]').forEach((element) => fillAlloy(element, answer));
}
