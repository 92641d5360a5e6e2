import { UppyContextProvider, useDropzone, useFileInput, useUppyState } from '@uppy/react';
import { useState } from 'react';
import type { FileDropProps } from './FileDrop';
import { ArrivedFile, SendingFile } from './FileRows';
import { ACCEPTED } from './uploader';
import { useUploads, type Uploads } from './use-uploads';

const CHOOSER = { accept: ACCEPTED, multiple: true };

/** The file box with its list; loaded when it is first needed. */
export default function LiveFileDrop(props: FileDropProps) {
  const uploads = useUploads(props.onFiles);
  return (
    <UppyContextProvider uppy={uploads.uppy}>
      <DropField id={props.id} refused={uploads.refused} />
      <FileList uploads={uploads} {...props} />
      <p className="sr-only" role="status">
        {uploads.said}
      </p>
    </UppyContextProvider>
  );
}

/** The field to drop files on, and the button that opens the chooser. */
function DropField({ id, refused }: { id: string; refused: string | null }) {
  const [over, setOver] = useState(false);
  const [options] = useState(() => ({
    noClick: true,
    onDragEnter: () => setOver(true),
    onDragLeave: () => setOver(false),
    onDrop: () => setOver(false),
  }));
  const { getRootProps } = useDropzone(options);
  const { getInputProps, getButtonProps } = useFileInput(CHOOSER);
  const { onDragEnter, onDragOver, onDragLeave, onDrop } = getRootProps();
  return (
    <div
      className={over ? 'file-drop is-over' : 'file-drop'}
      onDragEnter={onDragEnter}
      onDragOver={onDragOver}
      onDragLeave={onDragLeave}
      onDrop={onDrop}
    >
      <input {...getInputProps()} className="sr-only" tabIndex={-1} aria-labelledby={`${id}-heading`} />
      <button {...getButtonProps()} className="button" aria-describedby={`${id}-hint`}>
        Choose files
      </button>
      <p className="hint" id={`${id}-hint`}>
        Or drop them here. JPEG, PNG, WebP and PDF; STL, OBJ, PLY, 3MF and STEP; up to 200 MB each.
      </p>
      {refused && (
        <p className="error" role="alert">
          {refused}
        </p>
      )}
    </div>
  );
}

function FileList({ uploads, alloy, onMeasure }: { uploads: Uploads } & Omit<FileDropProps, 'id'>) {
  const { uppy, files, remove } = uploads;
  const sending = useUppyState(uppy, (state) => state.files);
  const waiting = Object.values(sending);
  if (files.length + waiting.length === 0) return null;
  return (
    <ul className="rows mt-3" aria-label="Your files">
      {files.map((file) => (
        <ArrivedFile
          key={file.id}
          file={file}
          alloy={alloy}
          onMeasure={onMeasure}
          onRemove={() => void remove(file.id)}
        />
      ))}
      {waiting.map((file) => (
        <SendingFile
          key={file.id}
          name={file.name ?? 'A file'}
          sent={Number(file.progress.bytesUploaded || 0)}
          whole={file.size ?? 0}
          error={file.error ?? null}
          onRetry={() => void uppy.retryUpload(file.id)}
          onRemove={() => uppy.removeFile(file.id)}
        />
      ))}
    </ul>
  );
}
