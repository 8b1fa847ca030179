import { useMemo, useState, type DragEvent, type FocusEvent } from 'react';
import type { FieldPath, UseFormReturn } from 'react-hook-form';
import type { BillField, BillFieldTarget } from './bill-field-target';
import type { TypedBill } from './typed';

/** The text field of the form an event happened at. */
function fieldOf(target: EventTarget): HTMLInputElement | null {
  if (!(target instanceof HTMLInputElement) || target.name === '' || target.type === 'checkbox') return null;
  return target;
}

const labelOf = (field: HTMLInputElement) =>
  field.getAttribute('aria-label') ?? field.labels?.[0]?.textContent?.trim() ?? field.name;

/**
 * Follows the focus through the form and writes into its fields what is clicked or dropped from beside it.
 *
 * A dropped number takes the place of what stands in the field; the browser alone would set it in between.
 */
export function useFieldTarget(form: UseFormReturn<TypedBill>) {
  const [focused, setFocused] = useState<BillField | null>(null);
  const target = useMemo<BillFieldTarget>(() => {
    const fill = (text: string, path = focused?.path) => {
      const field = path as FieldPath<TypedBill> | undefined;
      if (field === undefined || form.getValues(field) === undefined) return false;
      form.setValue(field, text.trim(), { shouldDirty: true, shouldTouch: true, shouldValidate: true });
      form.setFocus(field);
      return true;
    };
    return { focused, fill };
  }, [focused, form]);
  const onFocus = (event: FocusEvent) => {
    const field = fieldOf(event.target);
    if (field) setFocused({ label: labelOf(field), path: field.name });
  };
  const onDragOver = (event: DragEvent) => {
    if (fieldOf(event.target) && event.dataTransfer.types.includes('text/plain')) event.preventDefault();
  };
  const onDrop = (event: DragEvent) => {
    const field = fieldOf(event.target);
    const text = event.dataTransfer.getData('text/plain');
    if (!field || text === '') return;
    event.preventDefault();
    target.fill(text, field.name);
  };
  return { target, handlers: { onFocus, onDragOver, onDrop } };
}
