/** Device names that Windows gives a meaning of their own, with any ending. */
const reservedOnWindows = /^(con|prn|aux|nul|com\d|lpt\d)(\.|$)/i;
const longest = 120;

/**
 * A name that is a plain file in the folder it is put into, on every system: no separators, no control characters, nothing
 * that Windows forbids, not hidden. The ending is kept, for it says what the file is.
 */
export function safeFileName(name: string): string {
  const last = name.split(/[\\/]/).at(-1) ?? '';
  const plain = Array.from(last, (char) => (char < ' ' || '<>:"|?*\u007f'.includes(char) ? '_' : char))
    .join('')
    .replace(/^[.\s]+/, '')
    .replace(/[.\s]+$/, '')
    .replace(/\p{Surrogate}/gu, '_'); // half a character: no file system keeps it
  const ending = /\.[A-Za-z0-9]{1,10}$/.exec(plain)?.[0] ?? '';
  const stem = Array.from(plain.slice(0, plain.length - ending.length))
    .slice(0, longest)
    .join('');
  const safe = `${stem || 'footage'}${ending}`;
  return reservedOnWindows.test(safe) ? `_${safe}` : safe;
}
