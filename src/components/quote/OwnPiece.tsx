import { Checkbox } from '../ui/Checkbox';
import { Field } from '../ui/Field';
import { Select } from '../ui/Select';
import { FinishedMass } from './Dimensions';
import { FileDrop } from './FileDrop';
import { usePriceState } from './price-context';

const TEXTURES = [
  { value: 'plain', label: 'Plain surfaces' },
  { value: 'worked', label: 'Some ornament or texture' },
  { value: 'ornate', label: 'Figures or ornament all over' },
];

/** A piece of the buyer's own: what it is, in words and files. */
export function OwnPiece() {
  const { fields, view, register, errorOf, set } = usePriceState();
  const alloy = view.choices.alloys.find(({ code }) => code === fields.alloy);
  return (
    <div>
      <h1 className="mt-6">A piece of your own</h1>
      <p className="mt-2 max-w-prose text-muted">
        Say what it is and how large. A closed 3D file is measured as it arrives, and its measure goes into the price.
      </p>
      <div className="mt-6 grid max-w-prose gap-5">
        <Field
          label="What is it?"
          name="description"
          optional
          rows={3}
          maxLength={500}
          hint="A mace head after a photograph, a buckle from my drawing."
          value={fields.description}
          error={errorOf('description')}
          registration={register('description')}
        />
        <FileDrop
          id="price-files"
          alloy={alloy}
          onMeasure={({ volumeMm3, longestMm }) => {
            set({ volumeMm3: String(volumeMm3), longestMm: String(longestMm), massG: '' });
            document.querySelector<HTMLInputElement>('[name="thinnestMm"]')?.focus();
          }}
        />
      </div>
    </div>
  );
}

/** Mass or volume, longest and thinnest, core, blade and surface of a piece of the buyer's own. */
export function OwnSizes() {
  const { fields, register, errorOf } = usePriceState();
  const size = (
    name: 'massG' | 'volumeMm3' | 'longestMm' | 'thinnestMm',
    label: string,
    unit: string,
    hint: string,
  ) => (
    <Field
      label={label}
      name={name}
      unit={unit}
      hint={hint}
      inputMode="decimal"
      value={fields[name]}
      error={errorOf(name)}
      registration={register(name)}
    />
  );
  return (
    <div className="own-sizes" role="group" aria-label="Size and make of the piece">
      {size('massG', 'Finished mass', 'g', 'Or leave it to the volume.')}
      {size('volumeMm3', 'Volume', 'mm³', 'From a closed 3D file; the mass goes first.')}
      {size('longestMm', 'Longest dimension', 'mm', 'From end to end.')}
      {size('thinnestMm', 'Thinnest section', 'mm', 'A guess will do.')}
      <Select
        label="Surface"
        name="texture"
        options={TEXTURES}
        value={fields.texture}
        error={errorOf('texture')}
        registration={register('texture')}
      />
      <div className="grid content-end gap-3">
        <Checkbox name="cored" value="on" checked={fields.cored === 'on'} registration={register('cored')}>
          It has a socket, an eye or a hollow
        </Checkbox>
        <Checkbox name="bladed" value="on" checked={fields.bladed === 'on'} registration={register('bladed')}>
          It is a blade or has an edge
        </Checkbox>
      </div>
      <FinishedMass label="What we reckon with" />
    </div>
  );
}
