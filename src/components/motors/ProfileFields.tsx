import { useFormContext } from 'react-hook-form';
import { profileDays, type ProfileDay } from '../../schemas/shaft-load';
import { SelectField, TextAreaField } from '../ui/Field';
import { messageAt } from '../ui/form-errors';
import type { LoadDraft } from './load-draft';

const labels: Record<ProfileDay, string> = { weekday: 'Monday to Friday', saturday: 'Saturday', sunday: 'Sunday' };

/** The first fault of a day: of the whole, or of an hour, which is named. */
function dayFault(errors: object, day: ProfileDay): string | undefined {
  const whole = messageAt(errors, `profile.${day}`);
  if (whole) return whole;
  for (let hour = 0; hour < 24; hour += 1) {
    const message = messageAt(errors, `profile.${day}.${hour}`);
    if (message) return `${hour} to ${hour + 1} h: ${message}`;
  }
  return undefined;
}

/** Shaft load by hour of the day and kind of day, typed or pasted. */
export function ProfileFields() {
  const { register, formState } = useFormContext<LoadDraft>();
  return (
    <div className="load-source">
      <p className="section-lead">
        24 loads a day, from midnight on, parted by blanks or pasted as a row or column; 0 is standstill. Shutdowns of
        the calendar hold here too.
      </p>
      <div className="load-profile">
        {profileDays.map((day) => (
          <TextAreaField
            key={day}
            label={labels[day]}
            rows={3}
            {...register(`profile.${day}`)}
            error={dayFault(formState.errors, day)}
          />
        ))}
        <SelectField
          label="Unit"
          {...register('profile.unit')}
          options={[
            { value: 'percent', label: '% of rated output' },
            { value: 'kW', label: 'kW at the shaft' },
          ]}
        />
      </div>
    </div>
  );
}
