import { z } from 'zod';

const measureSchema = z.object({
  volumeMm3: z.number().nullable(),
  boxMm: z.tuple([z.number(), z.number(), z.number()]),
  closed: z.boolean(),
  problems: z.array(z.string()),
});

const uploadSchema = z.object({
  id: z.uuid(),
  name: z.string(),
  kind: z.enum(['picture', 'document', 'mesh', 'step']),
  bytes: z.number(),
  thumb: z.string().nullable(),
  measure: measureSchema.nullable(),
});

/** A file in the studio's keeping, as its door answers. Sizes in bytes. */
export type Upload = z.output<typeof uploadSchema>;

const LOST = 'The file did not reach the studio: the connection broke. Try it again.';
const ODD = 'The studio’s answer could not be read, so the file may not have arrived. Try it again.';
const refusalSchema = z.object({ problem: z.object({ message: z.string() }) });

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

/** The stored file in an answer; null when the answer is something else. */
export function readUpload(body: unknown): Upload | null {
  const parsed = uploadSchema.safeParse(body);
  return parsed.success ? parsed.data : null;
}

/** Why a file was not taken: the studio's own sentence when the answer holds one. */
export function refusalOf(status: number, text: string): string {
  if (status === 0) return LOST;
  const parsed = refusalSchema.safeParse(parseJson(text));
  return parsed.success ? parsed.data.problem.message : ODD;
}

/** The list of files this browser has sent and not used; null when it cannot be had. */
export function readUploads(body: unknown): Upload[] | null {
  const parsed = z.object({ files: z.array(uploadSchema) }).safeParse(body);
  return parsed.success ? parsed.data.files : null;
}

/** Takes a file back. True when it is gone, also when it was gone before. */
export async function deleteUpload(id: string): Promise<boolean> {
  const response = await fetch(`/api/uploads/${id}`, { method: 'DELETE' }).catch(() => null);
  return response !== null && (response.ok || response.status === 404);
}

/** A size as people say it: "30.2 MB", "512 kB". */
export function sizeWords(bytes: number): string {
  const kilo = bytes / 1024;
  if (kilo < 1000) return `${Math.max(1, Math.round(kilo))} kB`;
  return `${(kilo / 1024).toFixed(1)} MB`;
}
