/** A place in a sheet, as the sheet's own problems name it: `scale.bars[0].lengthM`. */
export type FieldPath = string;

type Key = string | number;

function keys(path: FieldPath): Key[] {
  return path
    .split(/[.[\]]+/)
    .filter((part) => part !== '')
    .map((part) => (/^\d+$/.test(part) ? Number(part) : part));
}

export function valueAt(root: unknown, path: FieldPath): unknown {
  return keys(path).reduce<unknown>(
    (value, key) =>
      typeof value === 'object' && value !== null ? (value as Record<Key, unknown>)[key] : undefined,
    root,
  );
}

/** A copy of root with another value at the path; undefined removes the field. Whatever is not on the path is shared. */
export function withValue<T>(root: T, path: FieldPath, value: unknown): T {
  return replaced(root, keys(path), value) as T;
}

function replaced(node: unknown, [key, ...rest]: readonly Key[], value: unknown): unknown {
  if (key === undefined) return value;
  if (typeof key === 'number') {
    const list = Array.isArray(node) ? [...node] : [];
    list[key] = replaced(list[key], rest, value);
    return list;
  }
  const { [key]: old, ...others } = (node ?? {}) as Record<string, unknown>;
  const next = replaced(old, rest, value);
  return next === undefined ? others : { ...(node as object), [key]: next };
}
