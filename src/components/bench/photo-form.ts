/**
 * Makes the photo form kinder when scripts run: the picture is shown, its sending has a progress figure,
 * and a failed sending keeps picture and words and can be repeated. Without scripts it is a plain form.
 */
export function watchPhotoForm(form: HTMLFormElement): void {
  const file = form.querySelector<HTMLInputElement>('input[type=file]')!;
  const caption = form.querySelector<HTMLElement>('[data-caption]')!;
  const preview = form.querySelector<HTMLImageElement>('[data-preview]')!;
  const progress = form.querySelector<HTMLElement>('[data-progress]')!;
  caption.hidden = !file.files?.length;
  file.addEventListener('change', () => {
    const chosen = file.files?.[0];
    caption.hidden = !chosen;
    if (!chosen) return;
    form.querySelector<HTMLInputElement>('[name=takenAt]')!.value = new Date().toISOString();
    preview.src = URL.createObjectURL(chosen);
    preview.hidden = false;
    form.querySelector<HTMLInputElement>('[name=caption]')!.focus();
  });
  form.addEventListener('submit', (event) => {
    event.preventDefault();
    send(form, progress);
  });
}

function send(form: HTMLFormElement, progress: HTMLElement): void {
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
  request.onerror = () => failed('No signal. The photo is still here: send it again when there is.');
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
  return 'The studio did not answer as it should. Send the photo again in a minute.';
}
