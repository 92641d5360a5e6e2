import { afterEach, expect, it, vi } from 'vitest';
import { sendFilesWithProgress } from '../../src/components/ui/send-form';

const FORM = `<form data-sends-file action="/api/commissions/MF-0181/files">
  <p data-progress></p><button type="submit">Send this file</button></form>`;

/** A request that never leaves: it remembers where it would have gone. */
class Request {
  static opened: string[] = [];
  upload = {};
  open(_method: string, address: string) {
    Request.opened.push(new URL(address, 'http://localhost').pathname);
  }
  setRequestHeader() {}
  send() {}
}

afterEach(() => {
  vi.unstubAllGlobals();
  document.body.innerHTML = '';
});

it('sends a file in the background also from a form that came with later news', () => {
  vi.stubGlobal('XMLHttpRequest', Request);
  document.body.innerHTML = FORM;
  sendFilesWithProgress(document);
  document.body.innerHTML = FORM;
  const press = new Event('submit', { bubbles: true, cancelable: true });
  document.querySelector('form')!.dispatchEvent(press);
  expect(press.defaultPrevented).toBe(true);
  expect(Request.opened).toEqual(['/api/commissions/MF-0181/files']);
});
