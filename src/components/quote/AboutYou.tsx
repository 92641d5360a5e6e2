import { useEnquiryState } from './enquiry-context';
import { WordInput, WordTick } from './EnquiryFields';

export interface AboutYouProps {
  /** A blade asks for a declaration of age. */
  bladed: boolean;
  ownAddress: string | null;
}

/** Who asks, and what they declare. */
export function AboutYou({ bladed, ownAddress }: AboutYouProps) {
  return (
    <fieldset className="enquiry-part">
      <legend className="enquiry-legend">You</legend>
      <WordInput name="name" label="Name" autoComplete="name" maxLength={120} required />
      <WordInput
        name="email"
        label="Mail address"
        type="email"
        inputMode="email"
        autoComplete="email"
        maxLength={254}
        required
        readOnly={ownAddress !== null}
        hint={ownAddress ? 'The one you are signed in with.' : 'Our questions and the quote go there.'}
      />
      <WordInput name="phone" label="Telephone" type="tel" inputMode="tel" autoComplete="tel" maxLength={40} optional />
      {bladed && (
        <WordTick
          name="adult"
          hint="This piece is a blade. We sell blades to adults only, and the carrier asks for proof at the door."
        >
          I am 18 or over
        </WordTick>
      )}
      <WordTick
        name="consent"
        hint={
          <>
            How long and what for stands on the page about <a href="/privacy">privacy</a>.
          </>
        }
      >
        You may keep what I send to answer this enquiry
      </WordTick>
      <Trap />
    </fieldset>
  );
}

/** An input that no person meets: out of sight, out of the tab order, unspoken. Only programs fill it in. */
function Trap() {
  const { register } = useEnquiryState();
  return (
    <div className="sr-only" aria-hidden="true">
      <label htmlFor="website">Leave this empty</label>
      <input id="website" type="text" tabIndex={-1} autoComplete="off" {...register('website')} />
    </div>
  );
}
