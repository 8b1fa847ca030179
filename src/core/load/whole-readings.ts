import { quality, type LoadSeries } from './series';

/**
 * The series as pricing takes it: an interval counts only where every register that the series carries has its reading there.
 *
 * Files of one meter may carry different registers. Where kWh or lagging kvarh are carried elsewhere but not in an interval, the interval
 * is missing: what it cost cannot be told. Where leading kvarh alone are not, they are nought, as of a meter without that register.
 *
 * @returns the series itself where nothing is to be changed
 */
export function wholeReadings(load: LoadSeries): LoadSeries {
  const isCarried = (values: Float64Array) => values.some((value) => !Number.isNaN(value));
  const needed = [load.kwh, load.kvarhLagging].filter(isCarried);
  const hasLeading = isCarried(load.kvarhLeading);
  const isPresent = (at: number) => load.quality[at] !== quality.missing;
  const lacks = (at: number) => isPresent(at) && needed.some((values) => Number.isNaN(values[at]));
  const lacksLeading = (at: number) => hasLeading && isPresent(at) && Number.isNaN(load.kvarhLeading[at]);
  if (!load.quality.some((_, at) => lacks(at) || lacksLeading(at))) return load;
  const whole: LoadSeries = {
    ...load,
    kwh: load.kwh.slice(),
    kvarhLagging: load.kvarhLagging.slice(),
    kvarhLeading: load.kvarhLeading.slice(),
    quality: load.quality.slice(),
  };
  load.quality.forEach((_, at) => {
    if (lacks(at)) {
      whole.quality[at] = quality.missing;
      whole.kwh[at] = whole.kvarhLagging[at] = whole.kvarhLeading[at] = Number.NaN;
    } else if (lacksLeading(at)) whole.kvarhLeading[at] = 0;
  });
  return whole;
}
