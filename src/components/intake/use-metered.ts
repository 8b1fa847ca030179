import { useEffect, useState } from 'react';
import { fetchMetered } from '../../client/intake';
import type { MeteredPeriod } from '../../schemas/bill';
import { dayAfter } from './typed';

const restMs = 300;

/** What the kept readings say of a typed period, asked when the typing rests; null as long as nothing is known. */
export function useMetered(code: string, from: string, lastDay: string): MeteredPeriod | null {
  const [known, setKnown] = useState<{ key: string; metered: MeteredPeriod | null } | null>(null);
  const to = dayAfter(lastDay);
  const key = `${from}/${to}`;
  const isPeriod = /^\d{4}-\d{2}-\d{2}\/\d{4}-\d{2}-\d{2}$/.test(key) && from < to;
  useEffect(() => {
    if (!isPeriod) return;
    let isLeft = false;
    const timer = setTimeout(() => {
      // A form is typed without the meter as well: where it cannot be asked, nothing is said beside the fields.
      const answer = fetchMetered(code, { from, to }).catch(() => null);
      void answer.then((metered) => {
        if (!isLeft) setKnown({ key: `${from}/${to}`, metered });
      });
    }, restMs);
    return () => {
      isLeft = true;
      clearTimeout(timer);
    };
  }, [code, from, to, isPeriod]);
  return known?.key === key ? known.metered : null;
}
