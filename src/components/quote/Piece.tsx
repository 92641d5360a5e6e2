import { useDeferredValue, useEffect, useMemo, useState } from 'react';
import { scaleDrawing } from '../../casting/scale-drawing';
import type { Drawing } from '../../casting/drawing';
import type { EstimateFields } from '../../commission/pricing/estimate-fields';
import type { Choice, PriceChoices } from '../../commission/pricing/price-view';
import { FormDrawing } from '../catalogue/FormDrawing';
import { Select } from '../ui/Select';
import { fetchJson } from './fetch-json';
import { readPlates, type Plate } from './plates';
import { usePriceState } from './price-context';

export interface PieceProps {
  forms: readonly Choice[];
  /** The plate of the form the page began with; null for a piece of one's own. */
  plate: { slug: string; plate: Plate } | null;
}

/** The piece from the studio's catalogue: which form, its name and period, its picture at the wanted size. */
export function Piece({ forms, plate }: PieceProps) {
  const { fields, view, register, change, errorOf } = usePriceState();
  const { form } = view.choices;
  const shown = usePlate(form?.slug, plate);
  return (
    <div className="price-piece">
      <div className="max-w-96">
        <Select
          label="Form"
          name="form"
          options={forms.map(({ code, name }) => ({ value: code, label: name }))}
          value={fields.form}
          error={errorOf('form')}
          registration={register('form', (slug) => change({ form: slug }))}
        />
      </div>
      <h1 className="mt-6">{form?.name ?? 'Price a piece'}</h1>
      {form && (
        <p className="mt-2 max-w-prose text-muted">
          {form.period}. {shown?.summary}
        </p>
      )}
      <div className="price-picture">
        {form && shown && <ScaledDrawing form={form} drawing={shown.drawing} fields={fields} />}
      </div>
    </div>
  );
}

interface ScaledDrawingProps {
  form: NonNullable<PriceChoices['form']>;
  drawing: Drawing;
  fields: EstimateFields;
}

/** The form's picture at the dimensions asked for; drawn a moment later than the figures, so that typing stays quick. */
function ScaledDrawing({ form, drawing, fields }: ScaledDrawingProps) {
  const { length, width, thickness } = form.dimensionsMm;
  const ratio = (typed: string | undefined, own: number) => {
    const value = Number(typed?.replace(',', '.'));
    return typed && value > 0 ? Math.min(3, Math.max(0.3, value / own)) : 1;
  };
  const wanted = [
    ratio(fields.lengthMm, length),
    ratio(fields.widthMm, width),
    thickness === undefined ? 1 : ratio(fields.thicknessMm, thickness),
  ] as const;
  const [along, across, through] = [
    useDeferredValue(wanted[0]),
    useDeferredValue(wanted[1]),
    useDeferredValue(wanted[2]),
  ];
  const scaled = useMemo(
    () => scaleDrawing(drawing, { length: along, width: across, thickness: through }),
    [drawing, along, across, through],
  );
  const lettering = drawing.stance === 'lying' ? 1 / 54 : 1 / 28;
  return <FormDrawing drawing={scaled} name={form.name} views="plan" id="price-plate" lettering={lettering} />;
}

/** The plate of a form: at hand for the first one, fetched once for the others. */
function usePlate(slug: string | undefined, first: PieceProps['plate']): Plate | undefined {
  const [plates, setPlates] = useState<Record<string, Plate>>(first ? { [first.slug]: first.plate } : {});
  const missing = slug !== undefined && !plates[slug];
  useEffect(() => {
    if (!missing) return;
    let gone = false;
    void fetchJson('/forms/plates.json').then((body) => {
      if (!gone) setPlates(readPlates(body));
    });
    return () => {
      gone = true;
    };
  }, [missing]);
  return slug === undefined ? undefined : plates[slug];
}
