/**
 * What stands in a form that the server drew, by name: whoever typed before the scripts arrived keeps it. Boxes that
 * are not ticked are ''. Null where the form is not on the page, as on the server.
 */
export function typedBefore(formId: string, ticks: readonly string[]): Record<string, string> | null {
  if (typeof document === 'undefined') return null;
  const form = document.getElementById(formId);
  if (!(form instanceof HTMLFormElement)) return null;
  const typed: Record<string, string> = Object.fromEntries(ticks.map((name) => [name, '']));
  new FormData(form).forEach((value, name) => {
    if (typeof value === 'string') typed[name] = value;
  });
  return typed;
}
