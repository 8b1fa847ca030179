import XLSX from 'xlsx';
import { gridCaps, type Cell } from './grid';
import type { SheetCell } from './sheet';

/** What a number format shows. */
interface FormatMeaning {
  isDate: boolean;
  /** Hours beyond a day are counted on, as in [hh]:mm. */
  isElapsed: boolean;
  showsDay: boolean;
  showsHour: boolean;
}

const two = (figure: number): string => (figure < 10 ? `0${figure}` : String(figure));

/** Turns the cells of a sheet into raw cells; what formats and days mean is worked out once each. */
export class PlainCells {
  private readonly formats = new Map<string, FormatMeaning>();
  private day = Number.NaN;
  private date = '';

  constructor(private readonly is1904: boolean) {}

  /** The raw cell: text, a number, or the ISO text of a date. */
  of(cell: SheetCell): Cell {
    const { v } = cell;
    if (v === undefined || v === null || cell.t === 'z') return null;
    if (typeof v === 'number' && cell.t !== 'e') {
      const meaning = typeof cell.z === 'string' ? this.meaningOf(cell.z) : null;
      if (!meaning?.isDate) return v;
      return this.serialText(v + (this.is1904 && v >= 1 ? 1462 : 0), meaning);
    }
    if (cell.t === 'e') return '#N/A';
    if (cell.t === 'b') return v === true ? 'true' : 'false';
    return String(v).slice(0, gridCaps.cellCharacters).trim();
  }

  private meaningOf(format: string): FormatMeaning {
    const known = this.formats.get(format);
    if (known) return known;
    const plain = format.replace(/\[[^\]]*\]|"[^"]*"/g, '');
    const meaning = {
      isDate: XLSX.SSF.is_date(format),
      isElapsed: /\[h+\]/i.test(format),
      showsDay: /[dy]/i.test(plain),
      showsHour: /h/i.test(format),
    };
    this.formats.set(format, meaning);
    return meaning;
  }

  /** ISO text of a date serial of the 1900 system, by whole seconds; a time alone below one day. */
  private serialText(serial: number, format: FormatMeaning): Cell {
    if (format.isElapsed && serial >= 1 && serial <= 1.0000001) return '24:00';
    if (!(serial >= 0 && serial <= 110_000)) return serial;
    const seconds = Math.round(serial * 86_400);
    const day = Math.floor(seconds / 86_400);
    const rest = seconds - day * 86_400;
    if (day === 0 && !format.showsDay) return timeText(rest);
    if (day === 1 && rest === 0 && !format.showsDay) return '24:00';
    // Serial 60 is a day that never was; real tables begin long after it.
    if (day !== this.day) {
      this.day = day;
      this.date = new Date((day - 25_569) * 86_400_000).toISOString().slice(0, 10);
    }
    return format.showsHour || rest !== 0 ? `${this.date} ${timeText(rest)}` : this.date;
  }
}

function timeText(seconds: number): string {
  const rest = seconds % 60;
  const time = `${two(Math.floor(seconds / 3600))}:${two(Math.floor(seconds / 60) % 60)}`;
  return rest === 0 ? time : `${time}:${two(rest)}`;
}
