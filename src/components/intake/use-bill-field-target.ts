import { useMemo, useState, type DragEvent, type FocusEvent } from 'react';
import type { FieldPath, UseFormReturn } from 'react-hook-form';
import type { BillField, BillFieldTarget } from './bill-field-target';
import { isOffer, takeOffer, type Offer } from './pages/offer';
import { placePath } from './pages/typed-places';
import type { TypedBill } from './typed';

/** The text field of the form an event happened at. */
function fieldOf(target: EventTarget | null): HTMLInputElement | null {
  if (!(target instanceof HTMLInputElement) || target.name === '' || target.type === 'checkbox') return null;
  return target;
}

/** What a field is called: one of a line by the name the line has, others by their label. */
export function labelOf(field: HTMLInputElement): string {
  const [, line, part] = /^(lines\.\d+)\.(\w+)$/.exec(field.name) ?? [];
  const named = line && part !== 'label' ? fieldOf(document.getElementsByName(`${line}.label`)[0] ?? null)?.value : '';
  if (named) return part === 'amount' ? named : `${named}, ${part}`;
  return field.getAttribute('aria-label') ?? field.labels?.[0]?.textContent?.trim() ?? field.name;
}

/** What of an offer goes into a field: fields for days take dates, those for figures numbers, others the print itself. */
function textFor(field: HTMLInputElement, { kind, typed, place }: Offer): string | null {
  if (field.type === 'date') return kind === 'date' ? typed : null;
  if (field.inputMode === 'decimal') return kind === 'number' ? typed : null;
  return place.text;
}

const refused = (field: HTMLInputElement, { place }: Offer) =>
  field.type === 'date'
    ? `${labelOf(field)} takes a date; ${place.text} is none.`
    : `${labelOf(field)} takes a number; ${place.text} is a date.`;

/**
 * Follows the focus through the form and writes into its fields what is clicked or dropped from beside it.
 *
 * A dropped number takes the place of what stands in the field; the browser alone would set it in between.
 */
export function useFieldTarget(form: UseFormReturn<TypedBill>) {
  const [focused, setFocused] = useState<BillField | null>(null);
  const [said, setSaid] = useState('');
  const target = useMemo<BillFieldTarget>(() => {
    const fill = (offer: Offer, path = focused?.path) => {
      const field = path === undefined ? null : fieldOf(document.getElementsByName(path)[0] ?? null);
      if (!field) return setSaid('Choose a field of the form first; then the number goes there.');
      const text = textFor(field, offer);
      if (text === null) return setSaid(refused(field, offer));
      const name = field.name as FieldPath<TypedBill>;
      form.setValue(placePath(field.name) as FieldPath<TypedBill>, offer.place as never, { shouldDirty: true });
      form.setValue(name, text, { shouldDirty: true, shouldTouch: true, shouldValidate: true });
      form.setFocus(name);
      setSaid(`${offer.place.text} went into ${labelOf(field)}${text === offer.place.text ? '' : ` as ${text}`}.`);
    };
    const back = () => focused && form.setFocus(focused.path as FieldPath<TypedBill>);
    return { focused, said, fill, back };
  }, [focused, said, form]);
  const onFocus = (event: FocusEvent) => {
    const field = fieldOf(event.target);
    if (field) setFocused({ label: labelOf(field), path: field.name });
  };
  const onDragOver = (event: DragEvent) => {
    if (fieldOf(event.target) && isOffer(event.dataTransfer)) event.preventDefault();
  };
  const onDrop = (event: DragEvent) => {
    const field = fieldOf(event.target);
    const offer = takeOffer(event.dataTransfer);
    if (!field || !offer) return;
    event.preventDefault();
    target.fill(offer, field.name);
  };
  return { target, handlers: { onFocus, onDragOver, onDrop } };
}
