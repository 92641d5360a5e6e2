import { useCallback, useState, type SubmitEvent } from 'react';
import { Button } from '../ui/Button';
import { FormProblem } from '../ui/FormProblem';
import { AboutYou } from './AboutYou';
import { useHydrated } from './hydrated';
import { EnquiryContext } from './enquiry-context';
import type { EnquiryStart } from './enquiry-start';
import { FileDrop } from './FileDrop';
import { TheDesign } from './TheDesign';
import type { Upload } from './uploads';
import { ENQUIRY_FORM, useEnquiry } from './use-enquiry';
import { TheWish } from './TheWish';

/**
 * The enquiry: a plain form that posts to the studio's door, and with scripts the same form checked beside its fields
 * and sent without leaving the page until it is taken.
 */
export function EnquiryForm({ start }: { start: EnquiryStart }) {
  const hydrated = useHydrated();
  const [uploads, setUploads] = useState<readonly string[]>(start.uploads);
  const onFiles = useCallback((files: readonly Upload[]) => setUploads(files.map(({ id }) => id)), []);
  const enquiry = useEnquiry(start, uploads);
  const onSubmit = (event: SubmitEvent) => {
    event.preventDefault();
    if (!enquiry.sending) enquiry.send();
  };
  return (
    <EnquiryContext value={{ ...enquiry, words: start.words }}>
      <form
        method="post"
        action="/api/enquiries"
        id={ENQUIRY_FORM}
        className="enquiry"
        onSubmit={onSubmit}
        noValidate={hydrated}
      >
        <FormProblem problem={enquiry.problem} ids={{ uploads: 'enquiry-files-heading' }} />
        <input type="hidden" name="clientId" value={start.words.clientId} />
        {Object.entries(start.estimate).map(
          ([name, value]) => value && <input key={name} type="hidden" name={name} value={value} />,
        )}
        {uploads.map((id) => (
          <input key={id} type="hidden" name="uploads[]" value={id} />
        ))}
        <TheWish />
        <fieldset className="enquiry-part">
          <legend className="enquiry-legend">Files</legend>
          <FileDrop id="enquiry-files" alloy={start.alloy ?? undefined} onFiles={onFiles} />
          {enquiry.errorOf('uploads') && <p className="error">{enquiry.errorOf('uploads')}</p>}
        </fieldset>
        <TheDesign />
        <AboutYou bladed={start.bladed} ownAddress={start.ownAddress} />
        <div className="enquiry-part">
          <Button kind="main" disabled={enquiry.sending}>
            {enquiry.sending ? 'Sending the enquiry' : 'Send the enquiry'}
          </Button>
          <p className="hint mt-3">
            {start.ownAddress
              ? 'It counts at once, and its page opens.'
              : 'It counts once your address is confirmed: we mail you a link and a code.'}{' '}
            Asking costs nothing and binds nobody.
          </p>
        </div>
      </form>
    </EnquiryContext>
  );
}
