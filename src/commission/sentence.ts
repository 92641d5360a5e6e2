/** A label as it stands inside a sentence: only its first letter gives way, so that "Gate A open" is "gate A open". */
export function withinSentence(label: string): string {
  return label.charAt(0).toLowerCase() + label.slice(1);
}
