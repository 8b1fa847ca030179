import type { LoadFinding } from '../../core/load';
import type { ReadingGap } from '../../schemas/intervals';
import { FindingSlip } from '../ui/FindingSlip';
import { formatCount } from '../ui/format';
import { numberedFindings, wordFinding } from './load-findings';

/** What the readings show that may not be true, numbered as on the picture, behind the gaps. */
export function FindingSlips(props: { findings: LoadFinding[]; gaps: ReadingGap[]; timeZone: string }) {
  const { findings, gaps, timeZone } = props;
  const numbered = numberedFindings(findings, gaps);
  const more = findings.length - numbered.length;
  return (
    <>
      {numbered.map(({ finding, label }) => {
        const { title, text } = wordFinding(finding, timeZone);
        return (
          <FindingSlip key={label} letter={label} title={title} caution={finding.severity !== 'fault'}>
            {text}
          </FindingSlip>
        );
      })}
      {more > 0 && <p>{formatCount(more, 'further finding')} of the kind.</p>}
    </>
  );
}
