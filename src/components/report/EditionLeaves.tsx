import type { EditionContent } from '../../schemas/edition';
import { formatDate } from '../ui/format';
import { AnswerLeaf } from './AnswerLeaf';
import { AssumptionsLeaf } from './AssumptionsLeaf';
import { BillsLeaf } from './BillsLeaf';
import { MoneyLeaf } from './MoneyLeaf';
import { MotorsLeaf } from './MotorsLeaf';
import { editionName } from './words';

const taps = ['The answer', 'Bills', 'Motors', 'Money', 'Assumptions'].map((label, index) => ({
  label,
  href: `#page-${index + 1}`,
}));

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
  const shared = { content, taps, foot };
  return (
    <>
      <AnswerLeaf {...shared} />
      <BillsLeaf {...shared} pictures={pictures} />
      <MotorsLeaf {...shared} pictures={pictures} />
      <MoneyLeaf {...shared} pictures={pictures} />
      <AssumptionsLeaf {...shared} />
    </>
  );
}
