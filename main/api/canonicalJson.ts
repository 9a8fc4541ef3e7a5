/**
 * The one JSON text of a document, whatever the order its fields were written in: RFC 8785 (names sorted by UTF-16 code units,
 * no white space, numbers and strings as ECMAScript writes them). Fields of value undefined are left out, as in JSON.stringify.
 */
export function canonicalJson(value: unknown): string {
  if (Array.isArray(value)) return `[${value.map((v) => canonicalJson(v ?? null)).join(',')}]`;
  if (typeof value !== 'object' || value === null) return JSON.stringify(value);
  const fields = Object.entries(value)
    .filter(([, v]) => v !== undefined)
    .sort(([a], [b]) => (a < b ? -1 : 1))
    .map(([name, v]) => `${JSON.stringify(name)}:${canonicalJson(v)}`);
  return `{${fields.join(',')}}`;
}
