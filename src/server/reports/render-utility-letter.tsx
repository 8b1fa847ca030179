import { renderToStaticMarkup } from 'react-dom/server';
import { UtilityLetterPage } from '../../components/tariff/UtilityLetterPage';
import type { UtilityLetterContent } from '../../schemas/utility-letter';

/** The page of a letter as HTML that is stored and shown as it is ever after. */
export const renderUtilityLetter = (content: UtilityLetterContent, digest: string) =>
  renderToStaticMarkup(<UtilityLetterPage content={content} digest={`${digest.slice(0, 4)} ${digest.slice(4, 8)}`} />);
