import { fillFields, totalOf, type LetterClaim, type UtilityLetterContent } from '../../schemas/utility-letter';
import { formatDate, formatLongDate, formatMoney, formatPeriod } from '../ui/format';
import { claimRows, letterAbout, letterSubject } from './letter-words';

const paragraphs = (text: string) =>
  text
    .split(/\n{2,}/)
    .map((part) => part.trim())
    .filter(Boolean);

function Words({ text }: { text: string }) {
  return paragraphs(text).map((part, index) => (
    <p key={index} className="letter-words">
      {part}
    </p>
  ));
}

function Working({ claim }: { claim: LetterClaim }) {
  if (claim.working.length === 0) return null;
  return (
    <div className="letter-worked">
      <table className="formula letter-working">
        <caption className="text-left">How the amount by the schedule was worked out</caption>
        <tbody>
          {claim.working.map(({ label, working, result }, index) => (
            <tr key={index} className={index === claim.working.length - 1 ? 'equals' : undefined}>
              <th scope="row">{label}</th>
              <td>{working}</td>
              <td>{result}</td>
            </tr>
          ))}
        </tbody>
      </table>
    </div>
  );
}

function Claim({ claim, currency }: { claim: LetterClaim; currency: string }) {
  return (
    <section className="leaf-row letter-claim">
      <div className="reference">
        <p>
          <span className="finding-letter">{claim.letter}</span>
        </p>
        <p>{claim.billName}</p>
        <p>{formatPeriod(claim.from, claim.to)}</p>
        {claim.clause && <p>clause {claim.clause}</p>}
      </div>
      <div className="working">
        <h2 className="section-title">{claim.line ? `${claim.title}: ${claim.line}` : claim.title}</h2>
        <p className="letter-words">{claim.words}</p>
      </div>
      <div className="result">
        <table className="sums">
          <tbody>
            {claimRows(claim, currency).map(([label, amount], index, all) => (
              <tr key={label} className={index === all.length - 1 ? 'total' : 'plain'}>
                <th scope="row">{label}</th>
                <td>{amount}</td>
              </tr>
            ))}
          </tbody>
        </table>
      </div>
      <Working claim={claim} />
    </section>
  );
}

function Head({ content }: { content: UtilityLetterContent }) {
  const { addressee, practice, madeOn } = content;
  return (
    <div className="letter-head">
      <address>
        {addressee.name || 'To whom it goes'}
        {addressee.postal && `\n${addressee.postal}`}
      </address>
      <p>
        <b>{practice.name}</b>
        {practice.phone && <span>{practice.phone}</span>}
        <span>{formatDate(madeOn)}</span>
      </p>
    </div>
  );
}

export interface UtilityLetterPageProps {
  content: UtilityLetterContent;
  /** First signs of the digest; none while it is a draft. */
  digest: string | null;
}

/** The letter to the utility as it prints: one flowing leaf, since how much it says is not known before. */
export function UtilityLetterPage({ content, digest }: UtilityLetterPageProps) {
  const { claims, currency, by, practice, number, replyBy } = content;
  return (
    <article className="leaf leaf-flow letter" aria-label={`Letter ${number} to the utility`}>
      <div className="leaf-edge" aria-hidden="true" />
      <Head content={content} />
      <h1 className="leaf-finding leaf-finding-small">{letterSubject(content)}</h1>
      <dl className="letter-about">
        {letterAbout(content).map(([label, value]) => (
          <div key={label}>
            <dt>{label}</dt>
            <dd>{value}</dd>
          </div>
        ))}
      </dl>
      <Words text={fillFields(content.opening, content)} />
      {claims.map((claim) => (
        <Claim key={claim.findingId} claim={claim} currency={currency} />
      ))}
      <div className="letter-end">
        <table className="sums letter-total">
          <tbody>
            <tr className="total">
              <th scope="row">Claimed together</th>
              <td>{formatMoney(totalOf(claims), currency)}</td>
            </tr>
          </tbody>
        </table>
        <Words text={fillFields(content.closing, content)} />
        <p className="letter-words">
          <b>We ask for an answer by {formatLongDate(replyBy)}.</b>
        </p>
        <p className="letter-words">
          With kind regards,
          <br />
          <b>{by.name}</b>
          <br />
          {practice.name}
        </p>
      </div>
      <footer className="leaf-foot">
        <span>{content.client}</span>
        <span>Letter {number}</span>
        <span>{digest ? `digest ${digest}` : 'draft, not sent'}</span>
      </footer>
    </article>
  );
}
