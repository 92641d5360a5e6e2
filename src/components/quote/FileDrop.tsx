import { lazy, Suspense } from 'react';
import type { WeighedMetal } from '../../casting/measure-words';
import { useHydrated } from './hydrated';
import type { Upload } from './uploads';

const LiveFileDrop = lazy(() => import('./LiveFileDrop'));

export interface FileDropProps {
  id: string;
  /** The metal that a measured file is weighed in. */
  alloy?: WeighedMetal;
  /** Offers to take over what a closed file measures: volume in mm3, longest side in mm. */
  onMeasure?: (measure: { volumeMm3: number; longestMm: number }) => void;
  /** Told of every change of the files in the studio's keeping. Must stay the same function. */
  onFiles?: (files: readonly Upload[]) => void;
}

/** Drawings, photos and 3D files of an enquiry. Without scripts it says when and where they can be sent. */
export function FileDrop(props: FileDropProps) {
  const hydrated = useHydrated();
  return (
    <section className="file-drop-box" aria-labelledby={`${props.id}-heading`}>
      <p className="label" id={`${props.id}-heading`}>
        Drawings, photos and 3D files
      </p>
      <noscript>
        <p className="hint">
          Sending files from here needs scripts. Without them, send the enquiry first: once your address is confirmed,
          the commission’s own page takes your files.
        </p>
      </noscript>
      {hydrated && (
        <Suspense fallback={<p className="hint">One moment: the file box is on its way.</p>}>
          <LiveFileDrop {...props} />
        </Suspense>
      )}
    </section>
  );
}
