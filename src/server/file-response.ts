/** The header by which an endpoint tells the web server in front of it which file to send. Never leaves the machine. */
export const FILE_HEADER = 'x-pourwright-file';

// What somebody uploaded must never act as a page of ours. A browser's PDF reader does not run inside a sandbox.
const STORED_POLICY = "default-src 'none'; style-src 'unsafe-inline'; sandbox";
const PDF_POLICY = "default-src 'none'; object-src 'self'; style-src 'unsafe-inline'";

export interface StoredFile {
  /** Path inside the data folder, beginning with `uploads/`, as storage made it; never anything a request said. */
  path: string;
  /** Media type to declare, from what was found in the file when it arrived. */
  type: string;
  /** The name a person sees when saving it; any characters. */
  name?: string;
  as?: 'inline' | 'attachment';
  cacheControl?: string;
}

/**
 * Answers with a stored file. The body is left empty: the web server streams the file itself, with
 * ranges and at the reader's pace, where a Response body would be held in memory.
 */
export function fileResponse(file: StoredFile): Response {
  const headers = new Headers({
    [FILE_HEADER]: encodeURIComponent(file.path),
    'content-type': file.type,
    'content-disposition': disposition(file),
    'cache-control': `${file.cacheControl ?? 'private, no-cache'}, no-transform`,
    'content-security-policy': file.type === 'application/pdf' ? PDF_POLICY : STORED_POLICY,
  });
  return new Response(null, { headers });
}

/** RFC 6266 with the RFC 8187 form for names beyond ASCII. */
function disposition({ as = 'inline', name }: StoredFile): string {
  if (!name) return as;
  const ascii = name.replace(/[^\x20-\x7e]|["\\%]/g, '_');
  const encoded = encodeURIComponent(name.toWellFormed()).replace(/['()*]/g, (c) => `%${c.charCodeAt(0).toString(16)}`);
  return `${as}; filename="${ascii}"; filename*=UTF-8''${encoded}`;
}
