import type { EditionContent, EditionMotor } from '../../schemas/edition';
import { formatDate } from '../ui/format';
import { AnswerLeaf } from './AnswerLeaf';
import { AssumptionsLeaf } from './AssumptionsLeaf';
import { BillsLeaf } from './BillsLeaf';
import { MethodLeaf } from './MethodLeaf';
import { MoneyLeaf } from './MoneyLeaf';
import { MotorsLeaf } from './MotorsLeaf';
import { editionName } from './words';

const motorsPerLeaf = 2;

function inPairs(motors: readonly EditionMotor[]): EditionMotor[][] {
  const pages = Math.max(1, Math.ceil(motors.length / motorsPerLeaf));
  return Array.from({ length: pages }, (_, index) => motors.slice(index * motorsPerLeaf, (index + 1) * motorsPerLeaf));
}

export interface EditionLeavesProps {
  content: EditionContent;
  /** SVG by the name of the picture. */
  pictures: Record<string, string>;
  /** First figures of the digest over content and pictures. */
  digest: string;
}

/** The pages of an edition, as they are frozen and printed. */
export function EditionLeaves({ content, pictures, digest }: EditionLeavesProps) {
  const place = [content.client, content.site.name].join(', ');
  const foot = [
    `${content.practice.name}, for ${place}`,
    `${editionName(content, formatDate(content.madeOn))}, digest ${digest}`,
  ];
  const pairs = inPairs(content.motors);
  const motorTaps = pairs.map((pair, index) => (index === 0 ? 'Motors' : pair.map(({ name }) => name).join(', ')));
  const taps = ['The answer', 'Bills', ...motorTaps, 'Money', 'Assumptions', 'Method'].map((label, index) => ({
    label,
    href: `#page-${index + 1}`,
  }));
  const shared = { content, taps, foot };
  const after = 3 + pairs.length;
  return (
    <>
      <AnswerLeaf {...shared} />
      <BillsLeaf {...shared} pictures={pictures} />
      {pairs.map((pair, index) => (
        <MotorsLeaf key={index} {...shared} pictures={pictures} page={3 + index} shown={pair} />
      ))}
      <MoneyLeaf {...shared} pictures={pictures} page={after} />
      <AssumptionsLeaf {...shared} page={after + 1} />
      <MethodLeaf {...shared} page={after + 2} />
    </>
  );
}
