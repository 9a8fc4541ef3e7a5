import { NumberField, type NumberFieldProps } from './NumberField.tsx';

/** A number and its standard uncertainty, side by side. */
export function MeasuredField({
  u,
  assumedU,
  ...value
}: Omit<NumberFieldProps, 'isU'> & { readonly u: string; readonly assumedU?: string | undefined }) {
  return (
    <div class="measured-field">
      <NumberField {...value} />
      <NumberField field={u} label={value.label} unit={value.unit} assumed={assumedU} isU />
    </div>
  );
}
