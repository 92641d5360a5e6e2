/**
 * Sends a form that carries a file in the background, with a figure in its `[data-progress]` element. A
 * failed sending keeps everything in the form and can be repeated; a good one reloads the page.
 */
export function sendWithProgress(form: HTMLFormElement): void {
  form.addEventListener('submit', (event) => {
    event.preventDefault();
    send(form);
  });
}

/** The same for every form `[data-sends-file]` of a page, also for one that comes with later news. */
export function sendFilesWithProgress(page: Document): void {
  page.addEventListener('submit', (event) => {
    const form = event.target;
    if (!(form instanceof HTMLFormElement) || !form.matches('[data-sends-file]')) return;
    event.preventDefault();
    send(form);
  });
}

function send(form: HTMLFormElement): void {
  const progress = form.querySelector<HTMLElement>('[data-progress]')!;
  const button = form.querySelector<HTMLButtonElement>('button[type=submit]')!;
  const request = new XMLHttpRequest();
  request.open('POST', form.action);
  request.setRequestHeader('accept', 'application/json');
  request.responseType = 'text';
  const failed = (sentence: string) => {
    button.disabled = false;
    button.textContent = 'Send it again';
    progress.textContent = sentence;
  };
  request.upload.onprogress = ({ loaded, total }) => {
    progress.textContent = `Sending, ${Math.round((100 * loaded) / total)} %`;
  };
  request.onload = () => {
    if (request.status === 200) return location.reload();
    failed(sentenceOf(request.responseText));
  };
  request.onerror = () => failed('The connection broke. Nothing is lost here: send it again when there is signal.');
  button.disabled = true;
  request.send(new FormData(form));
}

function sentenceOf(body: string): string {
  try {
    const { problem } = JSON.parse(body) as { problem?: { message?: string } };
    if (problem?.message) return problem.message;
  } catch {
    // Not JSON: something between the phone and the studio answered instead of the studio.
  }
  return 'The studio did not answer as it should. Send it again in a minute.';
}
