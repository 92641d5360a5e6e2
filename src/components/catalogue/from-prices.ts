/** The part of `/api/rates/from-prices` these pages show. Money comes in words, so that the page loads no more than this. */
interface Answer {
  forms: Record<string, { words: string; wordsWithTax: string } | undefined>;
  alloys: { code: string; densityGPerCm3: number; contraction: number; meltLoss: number }[];
}

function isAnswer(value: unknown): value is Answer {
  if (typeof value !== 'object' || value === null || !('forms' in value) || !('alloys' in value)) return false;
  return typeof value.forms === 'object' && value.forms !== null && Array.isArray(value.alloys);
}

/** Today's from-prices and alloy settings, or null when they cannot be had: the page then keeps its own words. */
async function fetchFromPrices(): Promise<Answer | null> {
  try {
    const response = await fetch('/api/rates/from-prices', { headers: { accept: 'application/json' } });
    const answer: unknown = response.ok ? await response.json() : null;
    return isAnswer(answer) ? answer : null;
  } catch {
    return null;
  }
}

function fillForm(element: HTMLElement, answer: Answer) {
  const form = answer.forms[element.dataset.fromPrice ?? ''];
  const words = element.querySelector('[data-words]');
  if (form && words) words.textContent = `From ${form.wordsWithTax} with VAT`;
}

function fillPanel(panel: HTMLElement, answer: Answer) {
  const form = answer.forms[panel.dataset.fromPanel ?? ''];
  const figure = panel.querySelector('[data-figure]');
  const before = panel.querySelector('[data-before]');
  if (!form || !figure || !before) return;
  figure.textContent = form.wordsWithTax;
  before.textContent = `with VAT (${form.words} before), carriage apart`;
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
