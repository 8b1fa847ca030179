import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useState } from 'react';
import { listHours, type HoursAnswer } from '../../client/hours';
import { Queries } from '../../client/queries';
import { mondayOf } from '../../schemas/hour';
import { ColumnNames, SheetHeading, SheetPart } from '../intake/Sheet';
import { formatDate, formatHours, formatPercent } from '../ui/format';
import { ResultSums } from '../ui/ResultSums';
import { EntryList } from './EntryList';
import { HourForm } from './HourForm';
import { Members, type MembersProps } from './Members';
import { WeekTable } from './WeekTable';
import { hoursHeading, sumRows } from './words';

export interface HoursSheetProps extends MembersProps {
  answer: HoursAnswer;
  isPartner: boolean;
  today: string;
}

function Budget({ answer }: { answer: HoursAnswer }) {
  if (!answer.budgetHours) return <p>No budget of hours was agreed.</p>;
  const share = answer.sums.minutes / 60 / answer.budgetHours;
  return (
    <>
      <h3>
        {formatPercent(share)} of {formatHours(answer.budgetHours * 60)} h
      </h3>
      <span className="bar-track budget-bar" role="img" aria-label={`${formatPercent(share)} of the budget used`}>
        <span
          className={share > 1 ? 'bar bar-overdue' : 'bar'}
          style={{ width: `${Math.min(100, share * 80).toFixed(1)}%` }}
        />
        <span className="limit" style={{ left: '80%' }} />
      </span>
      <p>The tick is the budget.</p>
    </>
  );
}

interface PartProps {
  code: string;
  answer: HoursAnswer;
  isPartner: boolean;
  today: string;
  onChanged: (day?: string) => void;
}

function WritePart({ code, answer, isPartner, today, onChanged }: PartProps) {
  const last = answer.entries.find((entry) => entry.mine);
  const start = { day: today, time: '', station: last?.station ?? 'bills', note: '', billable: true };
  return (
    <SheetPart
      id="write"
      number="8.1"
      title="Write hours"
      reference={
        <>
          <p>Time as 1:45, 1.75, 105m or 0845-1030</p>
          <p>Minutes are kept as they are typed; nothing is rounded here</p>
        </>
      }
      result={<ResultSums title={isPartner ? 'All hours' : 'Your hours'} rows={sumRows(answer)} />}
    >
      <HourForm code={code} start={start} onSaved={(saved) => onChanged(saved.day)} />
    </SheetPart>
  );
}

function EntriesPart({ code, answer, isPartner, onChanged }: PartProps) {
  return (
    <SheetPart
      id="entries"
      number="8.3"
      title="Entries"
      reference={
        <>
          <p>Rate: the one in force on the day of the work; that of the engagement before the general one</p>
          <p>An entry is changed only by who wrote it; the trail keeps what it was</p>
        </>
      }
    >
      {answer.entries.length > 0 ? (
        <EntryList code={code} answer={answer} withPerson={isPartner} onChanged={() => onChanged()} />
      ) : (
        <p className="quiet">Nothing yet. The first entry stands here as soon as it is written.</p>
      )}
    </SheetPart>
  );
}

function Sheet({ code, answer: first, isPartner, today, members, others, me }: HoursSheetProps) {
  const queries = useQueryClient();
  const queryKey = ['hours', code];
  const { data: answer } = useQuery({ queryKey, queryFn: () => listHours(code), initialData: first });
  const [monday, setMonday] = useState(mondayOf(today));
  const onChanged = (day?: string) => {
    if (day) setMonday(mondayOf(day));
    void queries.invalidateQueries({ queryKey });
  };
  const part = { code, answer, isPartner, today, onChanged };
  return (
    <>
      <SheetHeading title={hoursHeading(code, answer, isPartner)} lead={`Today is ${formatDate(today)}.`} />
      <ColumnNames />
      <WritePart {...part} />
      <SheetPart
        id="week"
        number="8.2"
        title="The week"
        reference={<p>Days off in well, today in copper</p>}
        result={isPartner ? <Budget answer={answer} /> : null}
      >
        <WeekTable entries={answer.entries} withPerson={isPartner} {...{ monday, today }} onMonday={setMonday} />
      </SheetPart>
      <EntriesPart {...part} />
      <SheetPart
        id="members"
        number="8.4"
        title="Who works on it"
        reference={<p>A consultant opens the engagement only while they stand here</p>}
      >
        <Members {...{ code, members, others, me }} />
      </SheetPart>
    </>
  );
}

/** The station Hours: write, correct and read the hours of an engagement. */
export function HoursSheet(props: HoursSheetProps) {
  return (
    <Queries>
      <Sheet {...props} />
    </Queries>
  );
}
