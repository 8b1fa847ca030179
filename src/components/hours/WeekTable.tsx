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

export interface WeekTableProps {
  entries: HourView[];
  monday: string;
  today: string;
  withPerson: boolean;
  onMonday: (monday: string) => void;
}

const sum = (minutes: number[]) => minutes.reduce((total, one) => total + one, 0);

type Days = { day: string; className: string }[];

/** Days of the week with the look of their column: today washed, days off in well. */
const daysOf = (monday: string, today: string): Days =>
  dayNames.map((_, index) => {
    const day = addDays(monday, index);
    return { day, className: day === today ? 'day today' : index > 4 ? 'day off' : 'day' };
  });

const cellOf = (minutes: number) => (minutes > 0 ? formatHours(minutes) : '');

function WeekWalk({ monday, today, onMonday }: Pick<WeekTableProps, 'monday' | 'today' | 'onMonday'>) {
  const step = (weeks: number) => {
    const to = addDays(monday, weeks * 7);
    return (
      <Button kind="quiet" onClick={() => onMonday(to)}>
        Week {weekNumber(to)}
      </Button>
    );
  };
  return (
    <div className="week-walk">
      {step(-1)}
      <b aria-live="polite">
        Week {weekNumber(monday)}, {formatDay(monday)} to {formatDay(addDays(monday, 6))}
      </b>
      {addDays(monday, 7) <= today && step(1)}
    </div>
  );
}

function WeekHead({ days, today, withPerson }: { days: Days; today: string; withPerson: boolean }) {
  return (
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
        {days.map(({ day, className }, index) => (
          <th key={day} scope="col" className={className} aria-current={day === today ? 'date' : undefined}>
            {dayNames[index]}
            <span className="unit">{formatDay(day)}</span>
          </th>
        ))}
        <th scope="col">
          Week<span className="unit">h</span>
        </th>
      </tr>
    </thead>
  );
}

function WeekLine({ line, days, withPerson }: { line: Line; days: Days; withPerson: boolean }) {
  return (
    <tr>
      {withPerson && (
        <th scope="row" className="left">
          {line.person}
        </th>
      )}
      <th scope="row" className="left">
        {stationLabel(line.station)}
      </th>
      {days.map(({ day, className }, index) => (
        <td key={day} className={className}>
          {cellOf(line.minutes[index] ?? 0)}
        </td>
      ))}
      <td className="strong">{formatHours(sum(line.minutes))}</td>
    </tr>
  );
}

/** The week: a line per station, a column per day. */
export function WeekTable({ entries, monday, today, withPerson, onMonday }: WeekTableProps) {
  const days = daysOf(monday, today);
  const lines = linesOf(
    entries,
    days.map(({ day }) => day),
  );
  const totals = days.map((_, index) => sum(lines.map((line) => line.minutes[index] ?? 0)));
  const names = withPerson ? 2 : 1;
  return (
    <>
      <WeekWalk {...{ monday, today, onMonday }} />
      <div className="ledger-scroll" role="region" aria-label="Hours of the week" tabIndex={0}>
        <table className="ledger week-table">
          <WeekHead {...{ days, today, withPerson }} />
          <tbody>
            {lines.map((line) => (
              <WeekLine key={line.key} {...{ line, days, withPerson }} />
            ))}
            {lines.length === 0 && (
              <tr>
                <td className="left quiet" colSpan={names + 8}>
                  No hours are logged in this week.
                </td>
              </tr>
            )}
          </tbody>
          <tfoot>
            <tr>
              <th scope="row" className="left" colSpan={names}>
                Hours of the day
              </th>
              {totals.map((minutes, index) => (
                <td key={days[index]?.day}>{cellOf(minutes)}</td>
              ))}
              <td>{formatHours(sum(totals))}</td>
            </tr>
          </tfoot>
        </table>
      </div>
    </>
  );
}
