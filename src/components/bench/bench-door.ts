/** A door of the bench with the piece that is in hand, so that the page after it shows the same piece. */
export function benchDoor(ref: string, act: string, piece: { number: number }): string {
  return `/api/bench/${ref}/${act}?piece=${piece.number}`;
}
