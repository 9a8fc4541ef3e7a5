/** The contract's spelling of each unit for which another is usual. */
const contractSpelling: Readonly<Record<string, string>> = { 'm/s²': 'm/s2', 'm/s³': 'm/s3' };

/** Whether two units are the same, however they are spelt: `m/s²` is the `m/s2` of the contract. */
export function sameUnit(a: string, b: string): boolean {
  return (contractSpelling[a] ?? a) === (contractSpelling[b] ?? b);
}
