import type Uppy from '@uppy/core';
import { nanoid } from 'nanoid';
import { useEffect, useState } from 'react';
import { draftNumber, keepDraft, readDraft } from './draft';
import { fetchJson } from './fetch-json';
import { createUploader } from './uploader';
import { deleteUpload, readUpload, readUploads, refusalOf, type Upload } from './uploads';

/** The files of a draft: those the studio has, and the words about the last thing that happened. */
export interface Uploads {
  uppy: Uppy;
  files: Upload[];
  said: string;
  /** Why a file was not even sent. */
  refused: string | null;
  remove: (id: string) => Promise<void>;
}

/** Sends files, remembers which of them belong to this draft, and finds them again after a reload. */
export function useUploads(onFiles?: (files: readonly Upload[]) => void): Uploads {
  const [uppy] = useState(() => createUploader(draftNumber(nanoid())));
  const [files, setFiles] = useState<Upload[]>([]);
  const [said, setSaid] = useState('');
  const [refused, setRefused] = useState<string | null>(null);

  useEffect(() => {
    const kept = readDraft().uploads ?? [];
    if (kept.length > 0) {
      void fetchJson('/api/uploads/mine').then((body) => {
        const found = readUploads(body)?.filter(({ id }) => kept.includes(id));
        if (found) setFiles((now) => [...found, ...now.filter(({ id }) => !found.some((file) => file.id === id))]);
      });
    }
    return connect(uppy, {
      arrived: (file) => {
        keepDraft({ uploads: [...new Set([...(readDraft().uploads ?? []), file.id])] });
        setFiles((now) => [...now.filter(({ id }) => id !== file.id), file]);
        setSaid(`${file.name} has arrived.`);
      },
      failed: (name, message) => setSaid(`${name} was not taken. ${message}`),
      refused: setRefused,
    });
  }, [uppy]);
  useEffect(() => onFiles?.(files), [files, onFiles]);

  const remove = async (id: string) => {
    if (!(await deleteUpload(id))) return setSaid('The file could not be removed. Try it again.');
    keepDraft({ uploads: readDraft().uploads?.filter((kept) => kept !== id) });
    setFiles((now) => now.filter((file) => file.id !== id));
    setSaid('The file is removed.');
  };
  return { uppy, files, said, refused, remove };
}

interface Listeners {
  arrived: (file: Upload) => void;
  failed: (name: string, message: string) => void;
  refused: (message: string | null) => void;
}

function connect(uppy: Uppy, { arrived, failed, refused }: Listeners): () => void {
  const onSuccess = (file: { id: string } | undefined, response: { status: number; body?: unknown }) => {
    const upload = readUpload(response.body);
    if (!file) return;
    if (!upload) return uppy.setFileState(file.id, { error: refusalOf(response.status, '') });
    uppy.removeFile(file.id);
    arrived(upload);
  };
  const onError = (file: { id: string; name?: string } | undefined, error: { message: string }) => {
    const message = 'isNetworkError' in error ? refusalOf(0, '') : error.message;
    if (file) uppy.setFileState(file.id, { error: message });
    failed(file?.name ?? 'A file', message);
  };
  const onRefused = (_file: unknown, error: { message: string }) => refused(error.message);
  const onAdded = () => refused(null);
  uppy.on('upload-success', onSuccess);
  uppy.on('upload-error', onError);
  uppy.on('restriction-failed', onRefused);
  uppy.on('files-added', onAdded);
  return () => {
    uppy.off('upload-success', onSuccess);
    uppy.off('upload-error', onError);
    uppy.off('restriction-failed', onRefused);
    uppy.off('files-added', onAdded);
    uppy.cancelAll();
  };
}
