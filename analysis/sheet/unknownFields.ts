function isRecord(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value);
}

/** Paths of the fields that were written but that the schema dropped, as `scale.bars[0].lengthMm`. */
export function unknownFields(written: unknown, parsed: unknown, at = ''): string[] {
  if (Array.isArray(written) && Array.isArray(parsed)) {
    return written.flatMap((value, i) => unknownFields(value, parsed[i], `${at}[${i}]`));
  }
  if (!isRecord(written) || !isRecord(parsed)) return [];
  return Object.entries(written).flatMap(([name, value]) => {
    const path = at === '' ? name : `${at}.${name}`;
    return name in parsed ? unknownFields(value, parsed[name], path) : [path];
  });
}
