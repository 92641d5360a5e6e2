import { z } from 'zod';
import { drawingSchema } from '../../casting/drawing';

const plateSchema = z.object({ summary: z.string(), drawing: drawingSchema });

/** A form's words and drawing. */
export type Plate = z.output<typeof plateSchema>;

/** The plates as their address answers; none when the answer is something else. */
export function readPlates(body: unknown): Record<string, Plate> {
  const parsed = z.record(z.string(), plateSchema).safeParse(body);
  return parsed.success ? parsed.data : {};
}
