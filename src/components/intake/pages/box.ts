import type { Place } from '../../../schemas/attachment';

export type Box = Place['box'];

/** A box of an upright page on the page turned by quarters to the right. */
export function turnedBox([left, top, right, bottom]: Box, quarters: number): Box {
  switch (((quarters % 4) + 4) % 4) {
    case 1:
      return [1 - bottom, left, 1 - top, right];
    case 2:
      return [1 - right, 1 - bottom, 1 - left, 1 - top];
    case 3:
      return [top, 1 - right, bottom, 1 - left];
    default:
      return [left, top, right, bottom];
  }
}

/** Whether two boxes mark the same place; another browser measures letters a little differently. */
export const sameBox = (a: Box, b: Box) => a.every((edge, index) => Math.abs(edge - (b[index] ?? 0)) < 0.006);
