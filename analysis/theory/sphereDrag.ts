/**
 * Drag coefficient of a smooth sphere, Re up to 3e5: Clift & Gauvin's form with the constants of Turton & Levenspiel, Powder
 * Technol. 47 (1986) 83. Within 6 % of the standard drag curve of Clift, Grace & Weber (1978) from Re 0.1 to 1e5.
 */
export function sphereDrag(reynolds: number): number {
  if (reynolds <= 0) return 0; // no motion, no drag
  return (24 / reynolds) * (1 + 0.173 * reynolds ** 0.657) + 0.413 / (1 + 16300 * reynolds ** -1.09);
}
