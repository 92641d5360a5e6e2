import { INTENDED_USES } from '../../commission/enquiry/enquiry-choices';
import { RadioRows } from '../ui/RadioRows';
import { useEnquiryState } from './enquiry-context';
import { WordChoice, WordInput } from './EnquiryFields';

const NEEDED_BY = [
  { value: 'none', name: 'No date' },
  { value: 'season', name: 'By a season', note: 'A muster, a summer, an exhibition.' },
  { value: 'date', name: 'By a day', note: 'We say at once if it cannot be.' },
];

/** What is wanted, what for, by when and for how much. */
export function TheWish() {
  const { words, errorOf, register } = useEnquiryState();
  return (
    <fieldset className="enquiry-part">
      <legend className="enquiry-legend">The wish</legend>
      <WordInput
        name="wish"
        label="What have you in mind?"
        hint="The find it is after, what matters most, anything the figures do not say."
        rows={6}
        maxLength={4000}
        required
      />
      <WordChoice name="use" label="What is it for?" choices={INTENDED_USES} placeholder="Choose one" required />
      <RadioRows
        legend="Needed by"
        name="neededBy"
        rows={NEEDED_BY}
        value={words.neededBy ?? 'none'}
        error={errorOf('neededBy')}
        registration={register('neededBy')}
      />
      <div className="when-season">
        <WordInput name="neededBySeason" label="Which season?" hint="Such as spring 2027." maxLength={40} />
      </div>
      <div className="when-date max-w-60">
        <WordInput name="neededByDate" label="Which day?" type="date" />
      </div>
      <div className="max-w-60">
        <WordInput
          name="budget"
          label="Budget"
          optional
          inputMode="numeric"
          hint="Whole pounds, euros or dollars. It helps us say what is possible."
        />
      </div>
    </fieldset>
  );
}
