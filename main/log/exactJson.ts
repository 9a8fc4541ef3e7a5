/**
 * JSON text that says exactly what the value says. JSON.stringify writes NaN and infinities as null and drops what it does
 * not know; a record must not change like that in silence.
 *
 * Fields of value undefined are left out (an optional field that is not there); -0 is written as 0.
 *
 * @throws TypeError naming the place of what JSON cannot hold
 */
export function exactJson(value: unknown, indent?: number): string {
  refuseInexact(value, '');
  return JSON.stringify(value, null, indent);
}

function refuseInexact(value: unknown, path: string): void {
  if (value === null || typeof value === 'string' || typeof value === 'boolean') return;
  if (typeof value === 'number') {
    if (!Number.isFinite(value))
      throw new TypeError(`${path || 'the value'} is ${value}; JSON cannot hold it`);
  } else if (Array.isArray(value)) {
    // by index: forEach passes over holes, which JSON.stringify writes as null
    for (let i = 0; i < value.length; i++) refuseInexact(value[i], `${path}[${i}]`);
  } else if (typeof value === 'object' && isPlain(value)) {
    for (const [name, field] of Object.entries(value)) {
      if (field !== undefined) refuseInexact(field, path === '' ? name : `${path}.${name}`);
    }
  } else {
    throw new TypeError(`${path || 'the value'} is ${kindOf(value)}; JSON cannot hold it`);
  }
}

function isPlain(value: object): boolean {
  const prototype: unknown = Object.getPrototypeOf(value);
  return prototype === Object.prototype || prototype === null;
}

function kindOf(value: unknown): string {
  return typeof value === 'object' ? `a ${value?.constructor?.name ?? 'object'}` : typeof value;
}
