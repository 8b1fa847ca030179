import type { SearchView } from '../../schemas/search';
import { ButtonLink } from '../ui/Button';
import { formatCount } from '../ui/format';
import { LedgerTable } from '../ui/LedgerTable';
import { Notice } from '../ui/Notice';
import { amperes, settingsWords } from '../ui/setting-words';
import { alternativesTable, limitsTable } from './search-tables';
import { boundWords, flatWords, foundSpans, robustWords, saferWords, searchedBankWords } from './search-words';
import { searchSentence } from './words';

interface FoundProps {
  code: string;
  currency: string;
  jobId: number;
  found: SearchView;
  stale: boolean;
}

/** The cheapest setting, and the way to a plan of it. */
function FoundNotice({ code, currency, jobId, found, stale }: FoundProps) {
  return (
    <Notice
      kind={found.leaveAlone || stale ? 'plain' : 'done'}
      title={searchSentence(found.saving, found.leaveAlone, currency)}
    >
      <span>
        {settingsWords(found.fields, foundSpans(found))}. {formatCount(found.priced, 'year')} priced in steps of{' '}
        {amperes(found.stepA)}
        {found.exhaustive ? ', every setting there is.' : '.'}
      </span>
      {found.notes.map((note) => (
        <span key={note}>{note}</span>
      ))}
      {stale && (
        <span>Motors, bills, readings or tariff were changed since: search again before a plan is made of it.</span>
      )}
      {!stale && !found.leaveAlone && (
        <ButtonLink kind="secondary" size="small" href={`/engagements/${code}/plans?plan=new&search=${jobId}#form`}>
          Make it a plan
        </ButtonLink>
      )}
    </Notice>
  );
}

/** What the search found: setting, how sure, what it leaves, and what else could be done. */
export function SearchResult(props: FoundProps) {
  const { found, currency } = props;
  const { limits = [], alternatives = [], verdict } = found;
  const sentences = [...flatWords(found, currency), ...robustWords(found, currency), ...boundWords(found, currency)];
  return (
    <div className="search-found">
      <FoundNotice {...props} />
      {verdict && alternatives.length > 0 && <h3>{verdict}</h3>}
      {alternatives.length > 0 && (
        <LedgerTable
          {...alternativesTable(alternatives, found.standingTotal, currency)}
          label="Fields and capacitors"
        />
      )}
      {found.bank && <p className="hint">{searchedBankWords(found.bank)}</p>}
      {sentences.length > 0 && (
        <ul className="search-sentences">
          {sentences.map((sentence) => (
            <li key={sentence}>{sentence}</li>
          ))}
        </ul>
      )}
      {found.robustness?.safer && (
        <Notice kind="plain" title={saferWords(found.robustness.safer, foundSpans(found), currency)} />
      )}
      {limits.length > 0 && <LedgerTable {...limitsTable(limits)} label="Limits at the setting found" />}
    </div>
  );
}
