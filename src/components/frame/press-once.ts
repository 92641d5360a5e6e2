/** Lets each form marked `data-once` be sent once: a second press of its button while the first is under way does nothing. */
export function pressOnce(root: Document): void {
  const buttons = (form: Element) => form.querySelectorAll<HTMLButtonElement>('button[type="submit"]');
  root.addEventListener('submit', ({ target }) => {
    if (!(target instanceof HTMLFormElement) || !target.matches('[data-once]')) return;
    // After this event, so that the button's own name and value still go along.
    setTimeout(() => buttons(target).forEach((button) => (button.disabled = true)));
  });
  // Coming back by the browser's Back button shows the page as it was left.
  window.addEventListener('pageshow', ({ persisted }) => {
    if (!persisted) return;
    for (const form of root.querySelectorAll('form[data-once]')) {
      buttons(form).forEach((button) => (button.disabled = false));
    }
  });
}
