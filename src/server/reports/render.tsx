import { renderToStaticMarkup } from 'react-dom/server';
import { EditionLeaves, type EditionLeavesProps } from '../../components/report/EditionLeaves';

/** The pages of an edition as HTML that is stored and shown as it is ever after. */
export const renderLeaves = (props: EditionLeavesProps) => renderToStaticMarkup(<EditionLeaves {...props} />);
