import { measureWords, otherUnits } from '../../casting/measure-words';
import type { FileDropProps } from './FileDrop';
import { sizeWords, type Upload } from './uploads';

const KINDS = { picture: 'Picture', document: 'Drawing', mesh: '3D file', step: '3D file, kept as it is' } as const;

interface ArrivedFileProps extends Pick<FileDropProps, 'alloy' | 'onMeasure'> {
  file: Upload;
  onRemove: () => void;
}

/** A file in the studio's keeping, with its small picture or its measure in words. */
export function ArrivedFile({ file, alloy, onMeasure, onRemove }: ArrivedFileProps) {
  const { measure } = file;
  return (
    <li className="sent-file">
      {file.thumb ? <img src={file.thumb} alt="" width="72" height="72" loading="lazy" /> : <span aria-hidden="true" />}
      <div>
        <p className="font-[650] break-all">{file.name}</p>
        <p className="hint">
          {KINDS[file.kind]}, {sizeWords(file.bytes)}, received.
        </p>
        {measure && (
          <ul className="file-measure">
            {measureWords(measure, alloy).map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        )}
        {measure && onMeasure && <PriceByMeasure measure={measure} onMeasure={onMeasure} />}
      </div>
      <button type="button" className="button-text" onClick={onRemove} aria-label={`Remove ${file.name}`}>
        Remove
      </button>
    </li>
  );
}

type PriceByMeasureProps = Required<Pick<FileDropProps, 'onMeasure'>> & { measure: NonNullable<Upload['measure']> };

/** Takes a closed file's volume and longest side into the price, in the unit it was drawn in. */
function PriceByMeasure({ measure, onMeasure }: PriceByMeasureProps) {
  const { volumeMm3, boxMm } = measure;
  if (volumeMm3 === null) return null;
  const take = (factor: number) =>
    onMeasure({
      volumeMm3: Math.round(volumeMm3 * factor ** 3),
      longestMm: Math.round(Math.max(...boxMm) * factor * 10) / 10,
    });
  const units = otherUnits(boxMm);
  return (
    <>
      {units.length > 0 && <p className="hint mt-2">A 3D file does not say its unit. Which was it drawn in?</p>}
      <div className="mt-2 flex flex-wrap gap-2">
        {units.map(({ unit, factor, boxMm: sides }) => (
          <button key={unit} type="button" className="button button-quiet" onClick={() => take(factor)}>
            In {unit}: {sides.join(' × ')} mm
          </button>
        ))}
        <button type="button" className="button button-quiet" onClick={() => take(1)}>
          {units.length > 0 ? 'In millimetres, as read' : 'Price it by this measure'}
        </button>
      </div>
    </>
  );
}

interface SendingFileProps {
  name: string;
  /** Bytes gone so far, and all of them. */
  sent: number;
  whole: number;
  error: string | null;
  onRetry: () => void;
  onRemove: () => void;
}

/** A file on its way, or one that did not get there. */
export function SendingFile({ name, sent, whole, error, onRetry, onRemove }: SendingFileProps) {
  return (
    <li className="sent-file">
      <span aria-hidden="true" />
      <div>
        <p className="font-[650] break-all">{name}</p>
        {error ? (
          <p className="error">{error}</p>
        ) : (
          <>
            <progress className="file-progress" max={Math.max(1, whole)} value={sent} aria-label={`Sending ${name}`} />
            <p className="hint tabular-nums">
              {sent >= whole && whole > 0
                ? 'All sent; it is being looked at.'
                : `${sizeWords(sent)} of ${sizeWords(whole)}`}
            </p>
          </>
        )}
      </div>
      <span className="flex flex-wrap justify-end gap-x-4">
        {error && (
          <button type="button" className="button-text" onClick={onRetry} aria-label={`Try ${name} again`}>
            Try again
          </button>
        )}
        <button
          type="button"
          className="button-text"
          onClick={onRemove}
          aria-label={error ? `Remove ${name}` : `Cancel ${name}`}
        >
          {error ? 'Remove' : 'Cancel'}
        </button>
      </span>
    </li>
  );
}
