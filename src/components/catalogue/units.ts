import { lengthWords, massWords, type UnitSystem } from '../../casting/reader-units';

const KEY = 'units';

function remembered(): UnitSystem {
  try {
    return localStorage.getItem(KEY) === 'imperial' ? 'imperial' : 'metric';
  } catch {
    return 'metric';
  }
}

function remember(system: UnitSystem) {
  try {
    localStorage.setItem(KEY, system);
  } catch {
    // A browser without storage shows the choice on this page only.
    return;
  }
}

function show(system: UnitSystem) {
  document.querySelectorAll<HTMLElement>('[data-grams]').forEach((element) => {
    element.textContent = massWords(Number(element.dataset.grams), system);
  });
  document.querySelectorAll<HTMLElement>('[data-mm]').forEach((element) => {
    const lengths = (element.dataset.mm ?? '').split(' ').map(Number);
    element.textContent = lengths.map((mm) => lengthWords(mm, system)).join(' × ');
  });
}

/** Lets the reader choose grams and millimetres or ounces and inches, and remembers it in this browser. */
export function offerUnits(): void {
  const choice = document.querySelector<HTMLFieldSetElement>('[data-units]');
  if (!choice) return;
  const radios = choice.querySelectorAll<HTMLInputElement>('input[name="units"]');
  const chosen = remembered();
  radios.forEach((radio) => {
    radio.checked = radio.value === chosen;
    radio.addEventListener('change', () => {
      const system = radio.value === 'imperial' ? 'imperial' : 'metric';
      remember(system);
      show(system);
    });
  });
  choice.hidden = false;
  show(chosen);
}
