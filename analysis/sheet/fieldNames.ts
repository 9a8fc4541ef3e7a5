import { z } from 'zod';
import { sheetSchema } from './sheet.ts';

const unitSuffix =
  /(Mps2|Mps|KHz|Hz|Fps|Px|Deg|Rad|Kg|KPa|HPa|MPa|Pa|Rel|Percent|Mm|Cm|Km|In|Inch|Ft|Ms|Us|Ns|Min|Lb|G|M|S|C|K|F)$/;

/** A field's name without the unit at its end: `lengthMm` and `lengthM` are both `length`. */
export function stemOf(name: string): string {
  return name.replace(unitSuffix, '');
}

interface SchemaNode {
  properties?: Record<string, SchemaNode>;
  items?: SchemaNode;
  anyOf?: SchemaNode[];
  oneOf?: SchemaNode[];
}

function collectNames(node: SchemaNode, into: Set<string>): void {
  for (const [name, child] of Object.entries(node.properties ?? {})) {
    into.add(name);
    collectNames(child, into);
  }
  for (const child of [node.items, ...(node.anyOf ?? []), ...(node.oneOf ?? [])]) {
    if (child) collectNames(child, into);
  }
}

let names: ReadonlySet<string> | undefined;

/** Every field name that a sheet may hold, at whatever depth. */
function sheetFieldNames(): ReadonlySet<string> {
  if (!names) {
    const found = new Set<string>();
    collectNames(z.toJSONSchema(sheetSchema, { io: 'input' }) as SchemaNode, found);
    names = found;
  }
  return names;
}

/** The field that was probably meant by an unknown name: same stem, other unit or other case. */
export function fieldMeantBy(unknownName: string): string | null {
  const stem = stemOf(unknownName).toLowerCase();
  if (stem === '') return null;
  for (const known of sheetFieldNames()) {
    if (
      known !== unknownName &&
      (stemOf(known).toLowerCase() === stem || known.toLowerCase() === unknownName.toLowerCase())
    ) {
      return known;
    }
  }
  return null;
}
