/** A copy of a row without some of its fields. */
export function without<Row extends object, Field extends keyof Row>(row: Row, ...fields: Field[]): Omit<Row, Field> {
  const left = Object.entries(row).filter(([name]) => !fields.includes(name as Field));
  return Object.fromEntries(left) as Omit<Row, Field>;
}
