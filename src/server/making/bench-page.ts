/** The bench page of a commission with the piece that its form named in the door's own address. */
export function benchPage(ref: string | undefined, door: URL): string {
  const piece = door.searchParams.get('piece');
  return /^\d{1,3}$/.test(piece ?? '') ? `/bench/${ref}?piece=${piece}` : `/bench/${ref}`;
}
