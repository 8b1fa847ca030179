const least = 4096;

/**
 * The readings of a feed in the order of the file, in columns that grow without boxing: a feed of 100 MB holds hundreds of
 * thousands, and an object for each would take more memory than the file.
 */
export class EspiReadings {
  length = 0;
  /** Seconds since 1970 at which each begins; NaN where the reading does not say. */
  starts: Float64Array;
  /** Seconds each lasts; NaN where the reading does not say. */
  durations: Float64Array;
  values: Float64Array;
  /** Codes of quality, a bit each: a reading may carry several. */
  qualities: Uint32Array;
  /** Line of the file each ends on, 1 is the first. */
  lines: Uint32Array;

  /** @param expected  Readings room is made for; more may come */
  constructor(expected = 0) {
    const size = Math.max(least, Math.ceil(expected));
    this.starts = new Float64Array(size);
    this.durations = new Float64Array(size);
    this.values = new Float64Array(size);
    this.qualities = new Uint32Array(size);
    this.lines = new Uint32Array(size);
  }

  push(reading: { start: number; duration: number; value: number; qualities: number; line: number }): void {
    const at = this.length;
    if (at === this.starts.length) this.grow();
    this.starts[at] = reading.start;
    this.durations[at] = reading.duration;
    this.values[at] = reading.value;
    this.qualities[at] = reading.qualities;
    this.lines[at] = reading.line;
    this.length += 1;
  }

  private grow(): void {
    const size = Math.ceil(this.starts.length * 1.5);
    this.starts = grownFloats(this.starts, size);
    this.durations = grownFloats(this.durations, size);
    this.values = grownFloats(this.values, size);
    this.qualities = grownWords(this.qualities, size);
    this.lines = grownWords(this.lines, size);
  }
}

function grownFloats(values: Float64Array, size: number): Float64Array {
  const larger = new Float64Array(size);
  larger.set(values);
  return larger;
}

function grownWords(values: Uint32Array, size: number): Uint32Array {
  const larger = new Uint32Array(size);
  larger.set(values);
  return larger;
}

/** The bit of a code of quality; codes beyond those of the standard share the last. */
export const qualityBit = (code: number): number => (Number.isInteger(code) && code >= 0 ? 1 << Math.min(code, 30) : 0);

/** Quality codes 7 to 13 and 15 are edited, estimated, derived or projected figures; others stand as measured. */
export const estimatedBits = [7, 8, 9, 10, 11, 12, 13, 15].reduce((bits, code) => bits | qualityBit(code), 0);
