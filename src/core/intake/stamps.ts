import type { DateOrder } from './column-map';

const monthWords: Record<string, number> = Object.assign(Object.create(null) as Record<string, number>, {
  jan: 1, ene: 1, gen: 1, feb: 2, fev: 2, fév: 2, mar: 3, mär: 3, mae: 3, maa: 3, mrt: 3, apr: 4, avr: 4, abr: 4,
  may: 5, mai: 5, mag: 5, mei: 5, jun: 6, giu: 6, jui: 6, juin: 6, jul: 7, lug: 7, juil: 7, aug: 8, aou: 8, aoû: 8, ago: 8,
  sep: 9, set: 9, oct: 10, okt: 10, ott: 10, out: 10, nov: 11, dec: 12, dez: 12, dic: 12, déc: 12,
}); // prettier-ignore

// Months in full in English, German, French, Spanish, Italian, Portuguese and Dutch; longer words than these begin no date.
const wholeMonths =
  `january february march april may june july august september october november december januar februar märz maerz mai
  juni juli oktober dezember janvier février fevrier mars avril juin juillet août aout septembre octobre novembre décembre
  decembre enero febrero marzo abril mayo junio julio agosto septiembre setiembre octubre noviembre diciembre gennaio
  febbraio aprile maggio giugno luglio settembre ottobre dicembre janeiro fevereiro março maio junho julho setembro outubro
  novembro dezembro januari februari maart mei augustus sept`.split(/\s+/);

/** Number of a month by the beginning of its name in the languages files come in; 0 if it is none. */
export function monthOfWord(word: string): number {
  const lower = word.toLowerCase();
  if (lower.length > 4 && !wholeMonths.some((month) => month.startsWith(lower))) return 0;
  return monthWords[lower.slice(0, 4)] ?? monthWords[lower.slice(0, 3)] ?? 0;
}

const daysBefore = [0, 31, 59, 90, 120, 151, 181, 212, 243, 273, 304, 334];
const monthDays = [31, 28, 31, 30, 31, 30, 31, 31, 30, 31, 30, 31];
const isLeap = (year: number): boolean => (year % 4 === 0 && year % 100 !== 0) || year % 400 === 0;

/** Days since 1970-01-01 of a civil date, or NaN if there is no such day. Years 0 to 99 stand for 2000 to 2069 and 1970 to 1999. */
export function civilDay(yearPrinted: number, month: number, day: number): number {
  const year = yearPrinted < 70 ? yearPrinted + 2000 : yearPrinted < 100 ? yearPrinted + 1900 : yearPrinted;
  if (year < 1970 || year > 2200 || month < 1 || month > 12 || day < 1) return Number.NaN;
  const longest = (monthDays[month - 1] ?? 0) + (month === 2 && isLeap(year) ? 1 : 0);
  if (day > longest) return Number.NaN;
  const years = year - 1970;
  const leapDays = Math.floor((years + 1) / 4) - (year > 2100 ? 1 : 0);
  return years * 365 + leapDays + (daysBefore[month - 1] ?? 0) + day - 1 + (month > 2 && isLeap(year) ? 1 : 0);
}

const isDigit = (code: number): boolean => code >= 48 && code <= 57;
const isLetter = (code: number): boolean => (code >= 65 && code <= 90) || (code >= 97 && code <= 122) || code >= 192;

/**
 * Scans dates, times and stamps in place, without cutting the text. One scanner is used for many cells: `scan` collects the
 * fields of a cell, `resolve` gives them meaning in an order of day, month and year.
 */
export class StampScanner {
  private readonly fields = new Int32Array(10);
  private readonly lengths = new Uint8Array(10);
  private count = 0;
  /** Index of the field that is a month's name, or -1. */
  private monthField = -1;
  /** Index of the first field of the time of day, or -1 if no colon tells. */
  private timeField = -1;
  private colons = 0;
  private meridiem: '' | 'am' | 'pm' = '';
  private lastYear = 0;
  private lastMonth = 0;
  private lastDay = 0;
  private lastNumber = Number.NaN;

  /** Order that every cell from now on is read in; set, stamps that differ from the one before in their clock time alone are read at once. */
  steadyOrder: DateOrder | null = null;
  private memoText = '';
  private memoStart = 0;
  private memoLength = -1;
  private scannedLength = 0;
  /** Where the two digits of the hour stand in the stamp. */
  private hourAt = -1;
  private isRepeat = false;

  /** Minutes east of UTC as written, or NaN. */
  offsetMinutes = Number.NaN;
  /** The cell names a span, such as 00:00-00:15; the fields are its beginning. */
  isSpan = false;
  /** Set by `resolve`: days since 1970-01-01, NaN for a time alone. */
  day = Number.NaN;
  /** Set by `resolve`: minutes after midnight, up to 1440 (24:00); seconds as fractions; NaN for a date alone. */
  minute = Number.NaN;

  /** Collects the fields of text[start, end); false if it cannot be a date or time. */
  scan(text: string, start: number, end: number): boolean {
    this.isRepeat = this.memoLength === end - start && this.repeats(text, start);
    if (this.isRepeat) return true;
    this.memoLength = -1;
    this.memoText = text;
    this.memoStart = start;
    this.scannedLength = end - start;
    this.hourAt = -1;
    this.count = 0;
    this.monthField = -1;
    this.timeField = -1;
    this.colons = 0;
    this.meridiem = '';
    this.offsetMinutes = Number.NaN;
    this.isSpan = false;
    let at = start;
    while (at < end) {
      const code = text.charCodeAt(at);
      if (isDigit(code)) {
        const from = at;
        let field = 0;
        while (at < end && isDigit(text.charCodeAt(at))) {
          field = field * 10 + (text.charCodeAt(at) - 48);
          at += 1;
        }
        if (at - from > 14 || this.count > 8) return false;
        const before = from > start ? text.charCodeAt(from - 1) : 0;
        if (this.colons === 2 && (before === 46 || before === 44)) continue;
        if (at - from > 9) this.addCompact(text, from, at);
        else this.add(field, at - from);
      } else if (code === 58) {
        if (this.count === 0) return false;
        if (this.timeField < 0) {
          this.timeField = this.count - 1;
          this.hourAt = this.lengths[this.timeField] === 2 ? at - 2 - start : -1;
        }
        this.colons += 1;
        at += 1;
      } else if (code === 43 || code === 45) {
        if (this.timeField >= 0) return this.scanOffsetOrSpan(text, at, end);
        if (this.count === 0) return false;
        at += 1;
      } else if (isLetter(code)) {
        const next = this.scanWord(text, at, end);
        if (next < 0) return false;
        at = next;
      } else if (code === 47 || code === 46 || code === 32 || code === 34 || code === 44 || code === 160 || code === 39)
        at += 1;
      else return false;
    }
    return this.count > 0;
  }

  private add(field: number, length: number): void {
    this.fields[this.count] = field;
    this.lengths[this.count] = length;
    this.count += 1;
  }

  /** YYYYMMDDHHMM and YYYYMMDDHHMMSS do not fit 32 bits: split into date, hour, minute, second. */
  private addCompact(text: string, from: number, to: number): void {
    this.add(Number(text.slice(from, from + 8)), 8);
    for (let at = from + 8; at < to; at += 2) this.add(Number(text.slice(at, Math.min(at + 2, to))), 2);
  }

  private scanOffsetOrSpan(text: string, at: number, end: number): boolean {
    const rest = text.slice(at, end).replace(/"$/, '').trim();
    const offset = /^([+-])(\d{2}):?(\d{2})?$/.exec(rest);
    const hasDate = this.timeField > 0;
    const isGlued = text.charCodeAt(at - 1) !== 32 || rest.startsWith('+');
    if (offset && hasDate && isGlued) {
      const minutes = Number(offset[2]) * 60 + Number(offset[3] ?? 0);
      this.offsetMinutes = offset[1] === '-' ? -minutes : minutes;
      return true;
    }
    this.isSpan = rest.startsWith('-') && /\d/.test(rest);
    return this.isSpan;
  }

  /** Position after the word at `from`, or -1 if the word belongs to no date. */
  private scanWord(text: string, from: number, end: number): number {
    let at = from;
    while (at < end && isLetter(text.charCodeAt(at))) at += 1;
    const word = text.slice(from, at).toLowerCase();
    const follows = at < end ? text.charCodeAt(at) : 0;
    if (word === 't' && this.count > 0) return at;
    if (word === 'z' && this.count > 1) this.offsetMinutes = 0;
    else if (word === 'h' && this.count > 0) {
      if (this.timeField < 0) this.timeField = this.count - 1;
      this.colons += 1;
    } else if (word === 'am' || word === 'pm') this.meridiem = word;
    else if ((word === 'a' || word === 'p') && follows === 46) {
      this.meridiem = word === 'a' ? 'am' : 'pm';
      const dots = /^\.\s?m\.?/i.exec(text.slice(at, at + 4));
      return at + (dots?.[0].length ?? 0);
    } else if (
      this.timeField < 0 &&
      this.monthField < 0 &&
      monthOfWord(word) > 0 &&
      word.length >= 3 &&
      !isWeekday(word, text, at, end)
    ) {
      this.monthField = this.count;
      this.add(monthOfWord(word), 0);
    } else if (word === 'utc' || word === 'gmt') this.offsetMinutes = 0;
    // Zone letters behind a time (CET, EDT, MESZ) are not needed: the order of the rows tells the two passes apart.
    else if (
      !(this.timeField >= 0 && word.length <= 5) &&
      !isWeekday(word, text, at, end) &&
      !/^(de|of|st|nd|rd|th|heure|uhr)$/.test(word)
    )
      return -1;
    return at;
  }

  /** Whether the fields hold a date. */
  get hasDate(): boolean {
    return this.timeField !== 0;
  }

  /** Value and length of one of the three fields of the date; compact dates have none. */
  dateField(at: number): { value: number; length: number } {
    return { value: this.fields[at] ?? 0, length: this.lengths[at] ?? 0 };
  }

  get isCompact(): boolean {
    return this.lengths[0] === 8 && this.timeField !== 0;
  }

  get hasMonthWord(): boolean {
    return this.monthField >= 0;
  }

  /** Gives the fields meaning; false if they are no date or time in this order. */
  resolve(order: DateOrder): boolean {
    if (this.isRepeat) return true;
    this.day = Number.NaN;
    this.minute = Number.NaN;
    let at = 0;
    if (this.timeField !== 0) {
      at = this.resolveDate(order);
      if (at < 0) return false;
    }
    if (!this.resolveTime(this.timeField >= 0 ? this.timeField : at, at)) return false;
    this.remember();
    return true;
  }

  /** Keeps the stamp just resolved as the pattern of those that follow: a whole date, HH:MM and a tail without am or pm. */
  private remember(): void {
    const isPattern = this.hourAt >= 6 && this.timeField > 0 && this.meridiem === '' && !this.isSpan;
    if (isPattern && this.steadyOrder !== null) this.memoLength = this.scannedLength;
  }

  /** Whether a cell is the remembered stamp but for its HH:MM; sets the minute if so. */
  private repeats(text: string, start: number): boolean {
    if (this.steadyOrder === null) return false;
    const { hourAt } = this;
    for (let at = 0; at < this.memoLength; at += 1) {
      if (at >= hourAt && at < hourAt + 5 && at !== hourAt + 2) continue;
      if (text.charCodeAt(start + at) !== this.memoText.charCodeAt(this.memoStart + at)) return false;
    }
    const at = start + hourAt;
    const tens = text.charCodeAt(at) - 48;
    const ones = text.charCodeAt(at + 1) - 48;
    const tensOfMinute = text.charCodeAt(at + 3) - 48;
    const onesOfMinute = text.charCodeAt(at + 4) - 48;
    if (tens < 0 || ones < 0 || tensOfMinute < 0 || onesOfMinute < 0) return false;
    const hour = tens * 10 + ones;
    const minute = tensOfMinute * 10 + onesOfMinute;
    if (ones > 9 || onesOfMinute > 9 || hour > 23 || minute > 59) return false;
    // Seconds are part of the tail that is alike.
    this.minute = hour * 60 + minute + (this.minute - Math.floor(this.minute));
    return true;
  }

  /** Reads the fields as a time of day, bare figures as HMM or HHMM. */
  resolveTimeOfDay(): boolean {
    this.day = Number.NaN;
    this.minute = Number.NaN;
    if (this.timeField >= 0) return this.resolveTime(0, 0);
    if (this.count !== 1 || this.meridiem !== '') return this.resolveTime(0, 0);
    const figure = this.fields[0] ?? 0;
    const withoutSeconds = (this.lengths[0] ?? 0) > 4 ? Math.floor(figure / 100) : figure;
    if (withoutSeconds > 2400 || withoutSeconds % 100 > 59) return false;
    this.minute = Math.floor(withoutSeconds / 100) * 60 + (withoutSeconds % 100);
    return true;
  }

  private resolveDate(order: DateOrder): number {
    const fields = this.fields;
    const first = fields[0] ?? 0;
    if (this.lengths[0] === 8) {
      this.day = this.dayOf(Math.floor(first / 10_000), Math.floor(first / 100) % 100, first % 100);
      return Number.isNaN(this.day) ? -1 : 1;
    }
    if (this.count < 3 || (this.timeField >= 0 && this.timeField < 3)) return -1;
    if (this.monthField >= 0) this.day = this.dayWithMonthWord();
    else if (order === 'YMD' || this.lengths[0] === 4) this.day = this.dayOf(first, fields[1] ?? 0, fields[2] ?? 0);
    else if (order === 'MDY') this.day = this.dayOf(fields[2] ?? 0, first, fields[1] ?? 0);
    else this.day = this.dayOf(fields[2] ?? 0, fields[1] ?? 0, first);
    return Number.isNaN(this.day) ? -1 : 3;
  }

  private dayWithMonthWord(): number {
    const others = [0, 1, 2].filter((at) => at !== this.monthField);
    const [one = 0, two = 0] = others;
    const yearFirst = this.lengths[one] === 4;
    const year = this.fields[yearFirst ? one : two] ?? 0;
    return this.dayOf(year, this.fields[this.monthField] ?? 0, this.fields[yearFirst ? two : one] ?? 0);
  }

  /** Most rows repeat the day of the row before. */
  private dayOf(year: number, month: number, day: number): number {
    if (year === this.lastYear && month === this.lastMonth && day === this.lastDay) return this.lastNumber;
    this.lastYear = year;
    this.lastMonth = month;
    this.lastDay = day;
    this.lastNumber = civilDay(year, month, day);
    return this.lastNumber;
  }

  private resolveTime(from: number, dateEnds: number): boolean {
    if (from < dateEnds && this.timeField >= 0) return false;
    const given = this.count - from;
    if (given === 0) return !Number.isNaN(this.day);
    let hour = this.fields[from] ?? 0;
    let minute = given > 1 ? (this.fields[from + 1] ?? 0) : 0;
    let second = given > 2 ? (this.fields[from + 2] ?? 0) : 0;
    if (given === 1 && (this.lengths[from] ?? 0) > 2) {
      if ((this.lengths[from] ?? 0) > 4) {
        second = hour % 100;
        hour = Math.floor(hour / 100);
      }
      minute = hour % 100;
      hour = Math.floor(hour / 100);
    }
    if (given > 3) return false;
    if (this.meridiem !== '') {
      if (hour < 1 || hour > 12) return false;
      hour = (hour % 12) + (this.meridiem === 'pm' ? 12 : 0);
    }
    if (hour > 24 || minute > 59 || second > 59 || (hour === 24 && minute + second > 0)) return false;
    this.minute = hour * 60 + minute + second / 60;
    return true;
  }
}

const weekdayWords =
  /^(mon|tue|wed|thu|fri|sat|sun|lun|mar|mer|mie|mié|jeu|jue|gio|ven|vie|sam|sab|sáb|dim|dom|mo|di|mi|do|fr|sa|so|lu|ma|me|je|gi|ve|sá)/;

/** A weekday before a date; `mar` counts as one only if another month word follows or figures hold the month. */
function isWeekday(word: string, text: string, at: number, end: number): boolean {
  if (!weekdayWords.test(word)) return false;
  if (monthOfWord(word) === 0) return true;
  return (
    word !== 'mar' &&
    word !== 'march' &&
    word !== 'marzo' &&
    word !== 'mars' &&
    /^[\s.,]+\d{1,2}[/.-]\d{1,2}[/.-]/.test(text.slice(at, end))
  );
}
