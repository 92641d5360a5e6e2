import { FORM_ONLY, OWN_ONLY, type EstimateField } from '../../commission/pricing/estimate-fields';
import { usePriceState } from './price-context';

const MODES = [
  { what: 'form', label: 'One of our forms' },
  { what: 'own', label: 'A piece of my own' },
] as const;

/** Goes over between the studio's forms and a piece of one's own; carries along what the other side was told. */
export function Modes() {
  const { fields, live, register, change } = usePriceState();
  return (
    <div className="price-modes" role="group" aria-label="What to price">
      <input type="hidden" defaultValue={fields.what} {...register('what')} />
      {MODES.map(({ what, label }) => (
        <button
          key={what}
          type="submit"
          name="what"
          value={what}
          className="mode"
          aria-pressed={fields.what === what}
          onClick={(event) => {
            if (!live) return;
            event.preventDefault();
            change({ what });
          }}
        >
          {label}
        </button>
      ))}
      <CarriedAlong />
    </div>
  );
}

/** What the other side was told, and the form the sizes belong to: a plain form sends them along unseen. */
function CarriedAlong() {
  const { fields, live } = usePriceState();
  if (live) return null;
  const other: readonly EstimateField[] = fields.what === 'own' ? FORM_ONLY : OWN_ONLY;
  return (
    <>
      <input type="hidden" name="sized" value={fields.form ?? ''} />
      {other.map((name) => fields[name] && <input key={name} type="hidden" name={name} value={fields[name]} />)}
    </>
  );
}
