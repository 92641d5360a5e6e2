import { massWords } from '../../casting/reader-units';
import { Dimension } from './Dimension';
import { usePriceState } from './price-context';

/** Length, width and thickness of a form, and the mass it comes to. */
export function Dimensions() {
  const { form } = usePriceState().view.choices;
  if (!form) return null;
  const { length, width, thickness } = form.dimensionsMm;
  return (
    <div className="dimensions" role="group" aria-label="Dimensions and mass">
      <Dimension label="Length" name="lengthMm" own={length} least={10} most={1000} />
      <Dimension label="Widest" name="widthMm" own={width} least={3} most={400} />
      {thickness !== undefined && (
        <Dimension label="Thickest" name="thicknessMm" own={thickness} least={1} most={200} />
      )}
      <FinishedMass />
    </div>
  );
}

/** What the finished piece weighs and what is poured for it. */
export function FinishedMass({ label = 'Finished mass' }: { label?: string }) {
  const { estimate } = usePriceState();
  return (
    <div className="dimension">
      <p className="label">{label}</p>
      {estimate ? (
        <>
          <p className="dimension-figure">{massWords(estimate.massesG.finished, 'metric')}</p>
          <p className="hint">
            Within {Math.round(estimate.massTolerance * 100)} %, or {massWords(estimate.massesG.finished, 'imperial')}.{' '}
            {massWords(estimate.massesG.poured, 'metric')} poured, with feeders.
          </p>
        </>
      ) : (
        <p className="hint">Stands here once the size is known.</p>
      )}
    </div>
  );
}
