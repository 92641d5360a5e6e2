/**
 * Keeps a page's live parts fresh. The element `[data-live-source]` names the event stream; on news the
 * page reads itself again and swaps every `[data-live]` part for its new self. Parts somebody is
 * typing in, or has typed something into, are left alone. Without scripts the page is simply the page.
 */
const source = document.querySelector<HTMLElement>('[data-live-source]')?.dataset['liveSource'];
let reading = false;
let again = false;

const FIELDS = 'input, textarea, select';

function isBusy(part: Element): boolean {
  const focused = document.activeElement;
  if (part.contains(focused) && focused?.matches(FIELDS)) return true;
  return [...part.querySelectorAll(FIELDS)].some(isChanged);
}

/** True when a field holds something that the page did not put there. */
function isChanged(field: Element): boolean {
  if (field instanceof HTMLSelectElement)
    return [...field.options].some((option) => option.selected && !option.defaultSelected && option.index > 0);
  if (field instanceof HTMLTextAreaElement) return field.value !== field.defaultValue;
  if (!(field instanceof HTMLInputElement) || field.type === 'hidden') return false;
  return field.value !== field.defaultValue || field.checked !== field.defaultChecked;
}

/** What the reader unfolded or folded stays so. */
function keepOpen(part: Element, next: Element): void {
  const folds = part.querySelectorAll('details');
  next.querySelectorAll('details').forEach((fold, index) => {
    fold.open = folds[index]?.open ?? fold.open;
  });
}

/** A part without the numbers that forms draw anew on every page. */
function shownIn(part: Element): string {
  return part.innerHTML.replace(/name="clientId" value="[^"]*"/g, '');
}

const STOPS = 'a[href], button, summary';

/** Swaps a part; a reader who stood on a link, a button or a fold of it stands on its successor. */
function swap(part: Element, next: Element): void {
  const stood = [...part.querySelectorAll<HTMLElement>(STOPS)].findIndex((stop) => stop === document.activeElement);
  part.replaceChildren(...next.childNodes);
  if (stood >= 0) part.querySelectorAll<HTMLElement>(STOPS)[stood]?.focus({ preventScroll: true });
}

async function refresh(): Promise<void> {
  if (reading) {
    again = true;
    return;
  }
  reading = true;
  try {
    const response = await fetch(location.href, { headers: { accept: 'text/html' }, credentials: 'same-origin' });
    if (!response.ok) return;
    const fresh = new DOMParser().parseFromString(await response.text(), 'text/html');
    for (const part of document.querySelectorAll('[data-live]')) {
      const next = fresh.querySelector(`[data-live="${part.getAttribute('data-live')}"]`);
      if (!next || isBusy(part)) continue;
      keepOpen(part, next);
      if (shownIn(next) !== shownIn(part)) swap(part, next);
    }
  } finally {
    reading = false;
    if (again) {
      again = false;
      void refresh();
    }
  }
}

if (source) {
  const stream = new EventSource(source);
  stream.addEventListener('news', () => void refresh());
  // Something may have happened between the page's making and the stream's opening, or while the stream was broken.
  stream.addEventListener('ready', () => void refresh());
}
