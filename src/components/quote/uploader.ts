import Uppy from '@uppy/core';
import XHRUpload from '@uppy/xhr-upload';
import { refusalOf } from './uploads';

const MOST_BYTES = 200 * 1024 * 1024;

/** What the file chooser offers first. Whatever comes is judged by the studio, by its bytes. */
export const ACCEPTED = '.jpg,.jpeg,.png,.webp,.pdf,.stl,.obj,.ply,.3mf,.step,.stp';

/** The same file within one draft always has the same number, so that sending it again answers as the first time did. */
export function fileNumber(draft: string, fileId: string): string {
  return `${draft}-${fileId.replace(/[^0-9A-Za-z_/-]/g, '_').slice(-120)}`;
}

/**
 * An uploader that starts as soon as a file is added and says the studio's own sentence when it is refused. A broken
 * connection is tried again by itself a few times.
 */
export function createUploader(draft: string): Uppy {
  const uppy = new Uppy({
    id: 'enquiry-files',
    autoProceed: true,
    restrictions: { maxFileSize: MOST_BYTES },
    locale: {
      strings: {
        exceedsSize: '%{file} is larger than %{size}, the most we can take. Send a link to it in your words instead.',
        noDuplicates: '%{fileName} is on the list already.',
      },
      pluralize: (count: number) => (count === 1 ? 0 : 1),
    },
    onBeforeFileAdded: (file) => ({ ...file, meta: { ...file.meta, clientId: fileNumber(draft, file.id) } }),
  });
  uppy.use(XHRUpload, {
    endpoint: '/api/uploads',
    fieldName: 'file',
    allowedMetaFields: ['clientId'],
    limit: 2,
    timeout: 0,
    shouldRetry: ({ status }) => status === 0 || status >= 502,
    onAfterResponse: ({ status, responseText }) => {
      if (status >= 400) throw new Error(refusalOf(status, responseText));
    },
  });
  return uppy;
}
