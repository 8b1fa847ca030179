import type { ChannelName } from '../channels';
import type { MeasureDefinition, QuantityEntry, ScheduleText } from '../model';

/** Whether a sum comes out the same whatever it is settled over. */
export const isSameOverAnyCell = ({ operation, channel, where }: MeasureDefinition): boolean =>
  operation === 'sum' && channel !== undefined && channel !== 'kvah' && !where;

/** Families that sum a channel over windows that share out all time: their members together are the whole. */
export function wholeFamilies(text: ScheduleText, channel: ChannelName): QuantityEntry[][] {
  const quantities = new Map(text.quantities.map((quantity) => [quantity.name, quantity]));
  return [...text.families.values()].flatMap(({ windows, members }) => {
    const entries = members.flatMap((name) => quantities.get(name) ?? []);
    const isSame = entries.every(
      ({ definition }) =>
        definition.kind === 'measure' && isSameOverAnyCell(definition) && definition.channel === channel,
    );
    return isSame && entries.length > 0 && sharesOutAllTime(windows, text) ? [entries] : [];
  });
}

/** Whether one of the windows is the rest of exactly the others. */
function sharesOutAllTime(windows: string[], text: ScheduleText): boolean {
  return windows.some((name) => {
    const rest = text.windows.get(name)?.restOf;
    const others = windows.filter((one) => one !== name);
    return rest !== undefined && rest.length === others.length && others.every((one) => rest.includes(one));
  });
}
