import { sendWithProgress } from '../ui/send-form';

/**
 * Makes the photo form kinder when scripts run: the picture is shown, its sending has a progress figure,
 * and a failed sending keeps picture and words and can be repeated. Without scripts it is a plain form.
 */
export function watchPhotoForm(form: HTMLFormElement): void {
  const file = form.querySelector<HTMLInputElement>('input[type=file]')!;
  const caption = form.querySelector<HTMLElement>('[data-caption]')!;
  const preview = form.querySelector<HTMLImageElement>('[data-preview]')!;
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
  sendWithProgress(form);
}
