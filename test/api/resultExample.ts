import type { Result } from '../../analysis/sheet/result.ts';
import { ballG, reductionExample } from '../log/reductionExample.ts';

/** A result of the right shape with one key value: what the API carries, not what it means. */
export function resultExample(sheetSha256: string): Result {
  const { result } = reductionExample({ keyValues: [ballG(9.81, 0.01)] });
  return { ...result, inputs: { ...result.inputs, sheetSha256 } };
}
