/** A label as it stands inside a sentence: only its first letter gives way, so that "Gate A open" is "gate A open". */
export function withinSentence(label: string): string {
  return label.charAt(0).toLowerCase() + label.slice(1);
}

/** A title with its number of pieces: "Flat axe, 6 pieces"; a title that says a number already, like "6 × Flat axe", stays. */
export function withPieces(title: string, pieces: number): string {
  return pieces === 1 || /^\d/.test(title) ? title : `${title}, ${pieces} pieces`;
}
