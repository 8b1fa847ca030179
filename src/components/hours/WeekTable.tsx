import { addDays } from '../../core/load';
import { weekNumber, type HourView } from '../../schemas/hour';
import { Button } from '../ui/Button';
import { formatDay, formatHours } from '../ui/format';
import { stationLabel } from './words';

const dayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];

interface Line {
  key: string;
  person: string;
  station: HourView['station'];
  minutes: number[];
}

/** A line per person and station, minutes by day. */
function linesOf(entries: HourView[], days: string[]): Line[] {
  const lines = new Map<string, Line>();
  for (const entry of entries) {
    const at = days.indexOf(entry.day);
    if (at < 0) continue;
    const key = `${entry.person} ${entry.station}`;
    const line = lines.get(key) ?? { key, person: entry.person, station: entry.station, minutes: days.map(() => 0) };
    line.minutes[at] = (line.minutes[at] ?? 0) + entry.minutes;
    lines.set(key, line);
  }
  return [...lines.values()].sort((a, b) => a.key.localeCompare(b.key));
}

const sum = (minutes: number[]) => minutes.reduce((total, one) => total + one, 0);

export interface WeekTableProps {
  entries: HourView[];
  monday: string;
  today: string;
  withPerson: boolean;
  onMonday: (monday: string) => void;
}

/** The week: a line per station, a column per day; today washed, days off in well. */
export function WeekTable({ entries, monday, today, withPerson, onMonday }: WeekTableProps) {
  const days = dayNames.map((_, index) => addDays(monday, index));
  const lines = linesOf(entries, days);
  const totals = days.map((_, index) => sum(lines.map((line) => line.minutes[index] ?? 0)));
  const dayClass = (index: number) => (days[index] === today ? 'day today' : index > 4 ? 'day off' : 'day');
  const cell = (minutes: number) => (minutes > 0 ? formatHours(minutes) : '');
  return (
    <>
      <div className="week-walk">
        <Button kind="quiet" onClick={() => onMonday(addDays(monday, -7))}>
          Week {weekNumber(addDays(monday, -7))}
        </Button>
        <b aria-live="polite">
          Week {weekNumber(monday)}, {formatDay(monday)} to {formatDay(addDays(monday, 6))}
        </b>
        {addDays(monday, 7) <= today && (
          <Button kind="quiet" onClick={() => onMonday(addDays(monday, 7))}>
            Week {weekNumber(addDays(monday, 7))}
          </Button>
        )}
      </div>
      <div className="ledger-scroll" role="region" aria-label="Hours of the week" tabIndex={0}>
        <table className="ledger week-table">
          <thead>
            <tr>
              {withPerson && (
                <th scope="col" className="left">
                  Person
                </th>
              )}
              <th scope="col" className="left">
                Station
              </th>
              {days.map((day, index) => (
                <th key={day} scope="col" className={dayClass(index)} aria-current={day === today ? 'date' : undefined}>
                  {dayNames[index]}
                  <span className="unit">{formatDay(day)}</span>
                </th>
              ))}
              <th scope="col">
                Week<span className="unit">h</span>
              </th>
            </tr>
          </thead>
          <tbody>
            {lines.map((line) => (
              <tr key={line.key}>
                {withPerson && (
                  <th scope="row" className="left">
                    {line.person}
                  </th>
                )}
                <th scope="row" className="left">
                  {stationLabel(line.station)}
                </th>
                {line.minutes.map((minutes, index) => (
                  <td key={days[index]} className={dayClass(index)}>
                    {cell(minutes)}
                  </td>
                ))}
                <td className="strong">{formatHours(sum(line.minutes))}</td>
              </tr>
            ))}
            {lines.length === 0 && (
              <tr>
                <td className="left quiet" colSpan={withPerson ? 10 : 9}>
                  No hours are told in this week.
                </td>
              </tr>
            )}
          </tbody>
          <tfoot>
            <tr>
              <th scope="row" className="left" colSpan={withPerson ? 2 : 1}>
                Hours of the day
              </th>
              {totals.map((minutes, index) => (
                <td key={days[index]}>{cell(minutes)}</td>
              ))}
              <td>{formatHours(sum(totals))}</td>
            </tr>
          </tfoot>
        </table>
      </div>
    </>
  );
}
