/** The studio as it signs its pages, papers and mails. `mail` is where a person answers. */
export const STUDIO = {
  name: 'Marrowfen Casting House',
  place: 'Ostrey Quay, on the Lenn estuary',
  mail: 'studio@example.org',
  owners: ['Wren Addlecombe', 'Tobias Marlhythe'],
} as const;
