import { quantityMeaning } from './quantityMeaning.ts';

/** A quantity's name, which may be broken between its words where there is little room. */
export function QuantityName({ quantity }: { readonly quantity: string }) {
  const words = quantity.split(/(?<=\.)|(?=[A-Z])/);
  return (
    <span title={quantityMeaning(quantity)}>
      {words.map((word) => (
        <span key={word}>
          <wbr />
          {word}
        </span>
      ))}
    </span>
  );
}
