import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { plateOf } from '../../src/casting/plate/plate';
import { approximateVolumeMm3 } from '../../src/casting/plate/volume';
import { scaleDrawing } from '../../src/casting/scale-drawing';
import { formSchema } from '../../src/commission/pricing/form';

const folder = new URL('../../src/content/forms/', import.meta.url);
const forms = readdirSync(folder).map((name) =>
  formSchema.parse(JSON.parse(readFileSync(new URL(name, folder), 'utf8'))),
);

// Scaling each axis of a solid multiplies its volume by the product of the three factors (the determinant of a diagonal
// affine map; any textbook of linear algebra). Rivet holes keep their size, so they are left out of the comparison.
describe('a drawing at another size', () => {
  it.each(forms.map((form) => [form.slug, form] as const))('%s grows by length x width x thickness', (_slug, form) => {
    const drawing = { ...form.drawing, holes: [] };
    const scaled = scaleDrawing(drawing, { length: 1.3, width: 0.8, thickness: 0.8 });
    const ratio = approximateVolumeMm3(scaled) / approximateVolumeMm3(drawing);
    // A bent spine drawn narrower bends less: its length follows no single factor, so those forms get room.
    const bent = drawing.bodies.some((body) => body.spine);
    expect(Math.abs(ratio / (1.3 * 0.8 * 0.8) - 1)).toBeLessThan(bent ? 0.25 : 0.02);
  });

  it('is the same description at its own size', () => {
    const { drawing } = forms[0]!;
    expect(scaleDrawing(drawing, { length: 1, width: 1, thickness: 1 })).toBe(drawing);
  });

  it('lies longer on the sheet beside the same scale bar', () => {
    const { drawing } = forms.find(({ slug }) => slug === 'leaf-shaped-sword')!;
    const [own, longer] = [1, 1.5].map((length) =>
      plateOf(scaleDrawing(drawing, { length, width: 1, thickness: 1 }), { views: 'plan', dots: 100 }),
    );
    expect(longer!.bar.lengthMm).toBe(own!.bar.lengthMm);
    expect(longer!.widthMm / own!.widthMm).toBeCloseTo(1.5, 1);
  });
});
