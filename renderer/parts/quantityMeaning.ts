import { quantities } from '../../analysis/verdict/quantities.ts';

/** What a key value is, as a sentence that stands by itself; empty for a quantity that is not known. */
export function quantityMeaning(quantity: string): string {
  const meaning = quantities.find((q) => q.quantity === quantity)?.meaning ?? '';
  return meaning.charAt(0).toUpperCase() + meaning.slice(1);
}
