import { formatDate, formatLongDate, formatMoney, formatPeriod } from '../../components/ui/format';
import { claimRows, letterAbout, letterSubject } from '../../components/tariff/letter-words';
import { totalOf, type LetterClaim, type UtilityLetterContent } from '../../schemas/utility-letter';
import { escape, ink, letterFrame, paragraph, quiet, rule } from './letter-parts';

/** The letter as a mail: what the printed page says, as text and as HTML. */
export interface UtilityLetterMail {
  subject: string;
  text: string;
  html: string;
}

const headOf = ({ letter, title, billName, from, to }: LetterClaim) =>
  `${letter}. ${title}: bill of ${billName}, ${formatPeriod(from, to, { year: true })}`;

function claimText(claim: LetterClaim, currency: string): string {
  const rows = claimRows(claim, currency).map(([label, amount]) => `  ${label}: ${amount}`);
  const working = claim.working.map(({ label, working: how, result }) => `    ${label}: ${how || result}`);
  const worked = working.length > 0 ? ['  How it was worked out:', ...working] : [];
  return [headOf(claim), claim.words, ...rows, ...worked].join('\n');
}

function textOf(content: UtilityLetterContent): string {
  const { addressee, claims, currency, closing, opening, by, practice, replyBy } = content;
  return [
    letterSubject(content),
    letterAbout(content)
      .map(([label, value]) => `${label}: ${value}`)
      .join('\n'),
    `${addressee.name},`,
    opening,
    ...claims.map((claim) => claimText(claim, currency)),
    `Together: ${formatMoney(totalOf(claims), currency)}`,
    closing,
    `We ask for an answer by ${formatLongDate(replyBy)}.`,
    `With kind regards,\n${by.name}\n${[practice.name, practice.phone].filter(Boolean).join(', ')}`,
  ].join('\n\n');
}

const cell = (html: string, style = '') =>
  `<td style="padding:6px 0;border-bottom:1px solid ${rule};font-size:14px;line-height:20px;color:${ink};${style}" class="ink line">${html}</td>`;

const row = (label: string, amount: string, strong = false) =>
  `<tr>${cell(escape(label))}${cell(escape(amount), `text-align:right;white-space:nowrap;${strong ? 'font-weight:700' : ''}`)}</tr>`;

const tableOf = (rows: string[]) =>
  `<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="border-top:2px solid ${ink};margin:0 0 12px">${rows.join('')}</table>`;

function claimHtml(claim: LetterClaim, currency: string): string {
  const rows = claimRows(claim, currency).map(([label, amount], index, all) =>
    row(label, amount, index === all.length - 1),
  );
  const working = claim.working.map(({ label, working: how, result }) => escape(`${label}: ${how || result}`));
  const worked = working.length
    ? `<p style="margin:0 0 20px;font-size:13px;line-height:20px;color:${quiet}" class="quiet">How it was worked out<br>${working.join('<br>')}</p>`
    : '';
  return [
    `<h2 style="margin:20px 0 8px;font-size:17px;line-height:22px;color:${ink}" class="ink">${escape(headOf(claim))}</h2>`,
    paragraph(escape(claim.words)),
    tableOf(rows),
    worked,
  ].join('\n');
}

const lines = (text: string) => escape(text).replaceAll('\n', '<br>');

function htmlOf(content: UtilityLetterContent): string {
  const { addressee, claims, currency, closing, opening, by, practice, replyBy, madeOn } = content;
  const body = [
    `<h1 style="margin:12px 0 16px;font-size:22px;line-height:27px;font-weight:900;color:${ink}" class="ink">${escape(letterSubject(content))}</h1>`,
    tableOf(letterAbout(content).map(([label, value]) => row(label, value))),
    paragraph(`${escape(addressee.name)},`),
    paragraph(lines(opening)),
    ...claims.map((claim) => claimHtml(claim, currency)),
    tableOf([row('Together', formatMoney(totalOf(claims), currency), true)]),
    paragraph(lines(closing)),
    paragraph(`<b>We ask for an answer by ${escape(formatLongDate(replyBy))}.</b>`),
    paragraph(
      `With kind regards,<br><b>${escape(by.name)}</b><br>${escape([practice.name, practice.phone].filter(Boolean).join(', '))}`,
    ),
  ].join('\n');
  return letterFrame({ title: letterSubject(content), practice: practice.name, date: formatDate(madeOn), body });
}

/** The letter to the utility as a mail. */
export const utilityLetterMail = (content: UtilityLetterContent): UtilityLetterMail => ({
  subject: letterSubject(content),
  text: textOf(content),
  html: htmlOf(content),
});
