import { useId, useState } from 'react';
import { isTimeZone } from '../../core/load';
import type { IntakeView } from '../../schemas/intake';
import { FieldError } from '../ui/FieldError';

export interface TimeZoneFieldProps {
  intake: IntakeView;
  busy: boolean;
  onChange: (timeZone: string) => void;
}

/** The zone of stamps without offset: the site's, unless the file was written elsewhere. */
export function TimeZoneField({ intake, busy, onChange }: TimeZoneFieldProps) {
  const id = useId();
  const [zone, setZone] = useState(intake.timeZone);
  const [fault, setFault] = useState<string | null>(null);
  const { siteTimeZone } = intake.engagement;
  const settle = () => {
    const typed = zone.trim();
    if (typed === intake.timeZone) return setFault(null);
    if (!isTimeZone(typed)) return setFault('There is no such time zone. Write one such as America/Chicago.');
    setFault(null);
    onChange(typed);
  };
  return (
    <tr>
      <th scope="row" className="left strong">
        <label htmlFor={id}>Time zone</label>
      </th>
      <td className="left" data-name="Taken as">
        <input
          id={id}
          type="text"
          className="input input-small decision-select"
          list={`${id}-zones`}
          value={zone}
          readOnly={busy || intake.state === 'kept' || intake.state === 'given-up'}
          aria-invalid={fault ? true : undefined}
          aria-describedby={fault ? `${id}-error` : undefined}
          onChange={(event) => setZone(event.target.value)}
          onBlur={settle}
          onKeyDown={(event) => event.key === 'Enter' && settle()}
        />
        <datalist id={`${id}-zones`}>
          {Intl.supportedValuesOf('timeZone').map((name) => (
            <option key={name} value={name} />
          ))}
        </datalist>
        <FieldError fault={fault} id={`${id}-error`} />
      </td>
      <td className="left wrap" data-name="Evidence">
        {intake.timeZone === siteTimeZone
          ? 'The site’s own; an offset written in the file overrules it'
          : `Not the site’s own, which is ${siteTimeZone}`}
      </td>
      <td />
    </tr>
  );
}
