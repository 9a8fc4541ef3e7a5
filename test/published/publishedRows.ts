import { readFileSync } from 'node:fs';

/** Rows of a table in fixtures/published by its column names; lines with `#` say where the figures are from. */
export function publishedRows(name: string): Record<string, string>[] {
  const text = readFileSync(new URL(`../../fixtures/published/${name}`, import.meta.url), 'utf8');
  const [head, ...rows] = text.split(/\r?\n/).filter((line) => line !== '' && !line.startsWith('#'));
  const names = head.split(',');
  return rows.map((row) => {
    const cells = row.split(',');
    return Object.fromEntries(names.map((column, i) => [column, cells[i] ?? '']));
  });
}
