import { useMemo } from 'react';
import type { Drawing } from '../../casting/drawing';
import { plateOf, type Plate } from '../../casting/plate/plate';

export interface FormDrawingProps {
  drawing: Drawing;
  /** What is drawn, for those who do not see it: "Flat axe". */
  name: string;
  /** `plan` is the face alone, for a list; `full` adds sections, side view and cut ticks. */
  views: 'plan' | 'full';
  /** Figures beside the bar are this part of the plate's longer side; a plate shown small takes larger ones. */
  lettering?: number;
  /** Makes the ids of title and description unique on the page. */
  id: string;
}

/** What the plate shows, in words. */
function description({ drawing, name, views }: FormDrawingProps): string {
  const cuts = drawing.cuts.map((cut) => cut.label.charAt(0).toLowerCase() + cut.label.slice(1)).join('; ');
  const parts =
    views === 'plan'
      ? 'the face of the piece'
      : `the face of the piece, filled sections (${cuts}) and the piece from its side, hollows dashed`;
  return `Line drawing of a ${name.charAt(0).toLowerCase()}${name.slice(1)}: ${parts}. The bar below is ${drawing.scaleBarMm} mm.`;
}

/** The bar in five blocks, every other one filled, with its length beside it. */
function ScaleBar({ bar, lettering }: { bar: Plate['bar']; lettering: number }) {
  const block = bar.lengthMm / 5;
  return (
    <g className="plate-bar">
      <rect x={bar.x} y={bar.y} width={bar.lengthMm} height={bar.heightMm} className="plate-bar-ground" />
      {[0, 2, 4].map((i) => (
        <rect key={i} x={bar.x + i * block} y={bar.y} width={block} height={bar.heightMm} />
      ))}
      <text
        x={bar.x + bar.lengthMm + lettering * 0.6}
        y={bar.y + bar.heightMm / 2 + lettering * 0.35}
        fontSize={lettering}
        className="plate-lettering"
      >
        {bar.lengthMm} mm
      </text>
    </g>
  );
}

/**
 * The picture of a form, drawn from its description in the manner of a finds drawing. Everything that shows a form
 * shows it through this component: list, page, estimate, quote and bench card. Works without scripts.
 */
export function FormDrawing(props: FormDrawingProps) {
  const { drawing, name, views, id, lettering = 1 / 54 } = props;
  const plate = useMemo(() => plateOf(drawing, { views, dots: views === 'plan' ? 900 : 2600 }), [drawing, views]);
  return (
    <svg
      className="plate"
      viewBox={`0 0 ${plate.widthMm} ${plate.heightMm}`}
      role="img"
      aria-labelledby={`${id}-title ${id}-words`}
      preserveAspectRatio="xMidYMid meet"
    >
      <title id={`${id}-title`}>{name}</title>
      <desc id={`${id}-words`}>{description(props)}</desc>
      {plate.marks.map((mark, i) => (
        // Sines differ in their last digit between engines, and then the server's path does as well as the browser's.
        <path key={i} className={`plate-${mark.role}`} d={mark.d} suppressHydrationWarning />
      ))}
      <ScaleBar bar={plate.bar} lettering={Math.max(plate.widthMm, plate.heightMm) * lettering} />
    </svg>
  );
}
