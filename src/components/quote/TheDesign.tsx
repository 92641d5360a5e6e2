import { DESIGN_SOURCES, LICENCES, MARK_PLACES } from '../../commission/enquiry/enquiry-choices';
import { WordChoice, WordInput } from './EnquiryFields';

/** Where the design comes from, by what right it may be cast, and where the studio's mark goes. */
export function TheDesign() {
  return (
    <fieldset className="enquiry-part">
      <legend className="enquiry-legend">The design and the mark</legend>
      <WordChoice
        name="designSource"
        label="Where does the design come from?"
        choices={DESIGN_SOURCES}
        placeholder="Choose one"
        required
      />
      <div className="when-internet">
        <WordChoice
          name="licence"
          label="Under which terms does the file stand?"
          choices={LICENCES}
          placeholder="Choose one"
          hint="They stand on the page it came from. Needed for a file found on the internet."
        />
      </div>
      <div className="when-rights">
        <WordInput
          name="rightsNote"
          label="How can we see it?"
          hint="The page, the book, the museum and who gave permission. Needed for a museum’s scan."
          rows={3}
          maxLength={1000}
        />
      </div>
      <WordChoice
        name="mark"
        label="Our mark, the year and a code"
        choices={MARK_PLACES}
        hint="Every piece is a modern reproduction and says so."
      />
    </fieldset>
  );
}
