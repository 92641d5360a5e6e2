/** An alloy's own colour as a small gate-shaped patch. Always stands beside the alloy's name, so it is silent. */
export function Swatch({ colour }: { colour: string }) {
  return (
    <svg className="swatch" viewBox="0 0 26 22" aria-hidden="true" focusable="false">
      <polygon points="0,0 26,0 22,22 4,22" fill={colour} />
    </svg>
  );
}
