import { lengthWords } from '../../casting/reader-units';
import { fieldIds } from '../ui/field-ids';
import { usePriceState } from './price-context';

export interface DimensionProps {
  label: string;
  name: 'lengthMm' | 'widthMm' | 'thicknessMm';
  /** The form's own size, which the slider stands around. */
  own: number;
  /** What the studio can take, mm. */
  least: number;
  most: number;
}

const SMALLEST = 0.6;
const LARGEST = 1.6;

/** One dimension: a figure to type and, once the page reckons by itself, a slider beside it. */
export function Dimension({ label, name, own, least, most }: DimensionProps) {
  const { fields, live, register, set, errorOf } = usePriceState();
  const typed = fields[name] ?? '';
  const value = Number(typed.replace(',', '.')) || own;
  const step = own < 20 ? 0.5 : 1;
  const onStep = (size: number) => Math.round(size / step) * step;
  const { hintId, errorId, describedBy } = fieldIds(name, true, errorOf(name));
  return (
    <div className="dimension">
      <label className="label" htmlFor={name} id={`${name}-label`}>
        {label}
      </label>
      <p className="dimension-figure">
        <input
          id={name}
          className="dimension-input"
          inputMode="decimal"
          autoComplete="off"
          size={5}
          defaultValue={typed}
          aria-describedby={describedBy}
          aria-invalid={errorOf(name) ? true : undefined}
          {...register(name)}
        />
        <span aria-hidden="true">mm</span>
      </p>
      <div className="slider-room">
        {live && (
          <input
            type="range"
            className="slider"
            aria-label={`${label}, slider`}
            aria-valuetext={`${value} mm`}
            min={Math.max(least, onStep(own * SMALLEST))}
            max={Math.min(most, onStep(own * LARGEST))}
            step={step}
            value={value}
            onChange={({ target }) => set({ [name]: target.value })}
          />
        )}
      </div>
      <p className="hint" id={hintId}>
        {lengthWords(value, 'imperial')}
        {value === own ? ', our pattern' : `; our pattern ${lengthWords(own, 'metric')}`}
      </p>
      {errorOf(name) && (
        <p className="error" id={errorId}>
          {errorOf(name)}
        </p>
      )}
    </div>
  );
}
