import { z } from 'zod';

/**
 * A piece described by numbers instead of by a picture. Lengths are millimetres. The first axis (`at`) runs along the
 * piece, the second (`across`) over its width, the third (`front` / `back`) through its thickness. The drawing, the
 * approximate volume and any solid are derived from this one description.
 */

const mm = z.number().min(-2000).max(2000);
const size = z.number().min(0).max(2000);
const point = z.tuple([mm, mm]);

/** Cross-section shapes. Each is a half-height over the width, see `plate/section.ts` for the formulae. */
export const sectionShapes = [
  'lenticular',
  'rhombic',
  'oval',
  'rectangular',
  'rounded',
  'hexagonal',
  'midrib',
  'flanged',
] as const;

/** A named section. `land` and `web` are fractions (0 to 1) whose meaning depends on the shape. */
const sectionSchema = z.object({
  shape: z.enum(sectionShapes),
  /** hexagonal: flat part of the width; midrib: width of the rib; flanged: width of one flange, all as a share. */
  land: z.number().gt(0).lt(1).optional(),
  /** midrib: height of the wings at the rib; flanged: thickness of the web, as a share of the full thickness. */
  web: z.number().gt(0).lt(1).optional(),
});

/** One place along a body: how wide, how thick, which section from here on. Left/right and front/back may differ. */
const stationSchema = z
  .object({
    at: mm,
    width: size.optional(),
    left: mm.optional(),
    right: mm.optional(),
    thickness: size.optional(),
    front: mm.optional(),
    back: mm.optional(),
    section: z.string().optional(),
    /** A break in the outline: the curve is not rounded over this station. */
    corner: z.boolean().optional(),
  })
  .refine((s) => s.width !== undefined || (s.left !== undefined && s.right !== undefined), {
    message: 'A station needs its width, or its left and right half-widths.',
  })
  .refine((s) => s.thickness !== undefined || (s.front !== undefined && s.back !== undefined), {
    message: 'A station needs its thickness, or its front and back half-thicknesses.',
  });

const stations = z
  .array(stationSchema)
  .min(2)
  .refine((list) => list.every((s, i) => i === 0 || s.at > list[i - 1]!.at), {
    message: 'Stations must follow one another along the axis.',
  });

/**
 * How a body ends: `cap` rounds the last millimetres to a dome, `bulge` curves the end line outwards (or inwards),
 * `notch` cuts a V of that depth and width out of its middle.
 */
const endSchema = z.object({
  cap: size.optional(),
  bulge: mm.optional(),
  notch: z.object({ depth: size, width: size }).optional(),
});

const hollowSchema = z.object({
  stations,
  section: z.string().optional(),
  ends: z.object({ start: endSchema.optional(), end: endSchema.optional() }).optional(),
});

/** A swept part: stations along a straight axis or along a `spine` lying in the plan or side plane. */
const bodySchema = z.object({
  name: z.string().min(1),
  /** Curve the stations follow, as points in the named plane; `at` is then the distance along it. */
  spine: z.object({ plane: z.enum(['plan', 'side']), points: z.array(point).min(2) }).optional(),
  stations,
  section: z.string().optional(),
  ends: z.object({ start: endSchema.optional(), end: endSchema.optional() }).optional(),
  /** Socket or eye: taken away from the body, drawn dashed. */
  hollow: hollowSchema.optional(),
  /** The same part again on the other side of the axis. */
  mirrored: z.boolean().optional(),
  /** Drawn as one with the main body (the default), or laid over it with its own outline. */
  over: z.boolean().optional(),
});

/** A hole through the piece from front to back; `d` is the diameter. */
const holeSchema = z.object({ at: mm, across: mm, d: z.number().gt(0).max(200), mirrored: z.boolean().optional() });

/** A pointed or rounded boss standing out from the axis, turned about it by `angle` degrees (0 = towards the reader). */
const knopSchema = z.object({
  at: mm,
  angle: z.number().min(-180).max(180),
  /** Distance from the axis to its foot and to its tip. */
  foot: size,
  tip: size,
  /** Half-length along the axis and half-spread around it at the foot. */
  along: size,
  spread: size,
});

const lineWeight = z.enum(['edge', 'fine', 'hidden']);

/** A drawn line: given by points, or following the outline at a share of the half-width. */
const lineSchema = z.union([
  z.object({
    view: z.enum(['plan', 'side']),
    weight: lineWeight.default('fine'),
    points: z.array(point).min(2),
    smooth: z.boolean().optional(),
    closed: z.boolean().optional(),
    mirrored: z.boolean().optional(),
  }),
  z.object({
    view: z.enum(['plan', 'side']),
    weight: lineWeight.default('fine'),
    /** Share of the half-width (plan) or half-thickness (side) of the first body at which the line runs. */
    follow: z.array(z.tuple([mm, z.number().min(-1.5).max(1.5)])).min(2),
    mirrored: z.boolean().optional(),
  }),
]);

/** A cut drawn as a filled section beside the plan. */
const cutSchema = z.object({ at: mm, label: z.string().min(1) });

export const drawingSchema = z.object({
  /** How the plate lies: long blades lie, axes stand with the cutting edge down, or the butt down. */
  stance: z.enum(['lying', 'standing', 'upturned']),
  /** Bar below the plate, in mm. */
  scaleBarMm: z.union([z.literal(10), z.literal(20), z.literal(50), z.literal(100)]),
  /** Sections may be enlarged on the plate of a long thin piece; the caption says so. */
  sectionScale: z.union([z.literal(1), z.literal(2)]).default(1),
  sections: z.record(z.string(), sectionSchema).default({}),
  /** The first body is the piece itself; what follows is joined to it. */
  bodies: z.array(bodySchema).min(1),
  holes: z.array(holeSchema).default([]),
  knops: z.array(knopSchema).default([]),
  lines: z.array(lineSchema).default([]),
  cuts: z.array(cutSchema).min(1),
});

export type Drawing = z.infer<typeof drawingSchema>;
export type End = z.infer<typeof endSchema>;
export type Body = Drawing['bodies'][number];
export type Station = Body['stations'][number];
export type SectionSpec = Drawing['sections'][string];
export type Knop = Drawing['knops'][number];
export type DrawnLine = Drawing['lines'][number];
