import { formatDate, formatLongDate } from '../../components/ui/format';
import { copper, escape, ink, letterFrame, paragraph, quiet, rule } from './letter-parts';

/** A row of a letter's list: what it is in bold, and beneath it what more there is to know. */
export interface LetterRow {
  title: string;
  about: string;
  /** A sentence of its own: why something came back. */
  reason?: string | null;
}

/** A part of a letter: sentences, a list, a link of its own. */
export interface LetterPart {
  paragraphs: string[];
  rows?: LetterRow[];
  link?: { label: string; url: string; ends: string | null };
}

/** A plain letter of the practice to one person. */
export interface PlainLetterInput {
  subject: string;
  recipientName: string;
  parts: LetterPart[];
  /** Who writes; for mails to the practice itself only the practice. */
  sender: string[];
  practice: string;
  /** Why the person gets it. */
  foot: string;
  madeOn: string;
}

/** The letter as a mail. */
export interface PlainLetter {
  subject: string;
  text: string;
  html: string;
}

const linkWords = (ends: string | null) =>
  ends ? `The link is yours alone and holds until ${formatLongDate(ends)}.` : 'You are asked to sign in.';

function partText({ paragraphs, rows = [], link }: LetterPart): string[] {
  const list = rows.map(({ title, about, reason }, index) =>
    [`${index + 1}. ${title}`, about && `   ${about}`, reason && `   ${reason}`].filter(Boolean).join('\n'),
  );
  return [
    ...paragraphs,
    ...(list.length > 0 ? [list.join('\n')] : []),
    ...(link ? [`${link.label}: ${link.url}\n${linkWords(link.ends)}`] : []),
  ];
}

function rowHtml({ title, about, reason }: LetterRow, index: number): string {
  const cell = `padding:9px 0;border-bottom:1px solid ${rule};font-size:15px;line-height:21px;color:${ink};vertical-align:top`;
  const more = about
    ? `<br><span style="font-size:13px;line-height:19px;color:${quiet}" class="quiet">${escape(about)}</span>`
    : '';
  const why = reason ? `<br>${lines(reason)}` : '';
  return (
    `<tr><td width="28" style="${cell}" class="ink line">${index + 1}.</td>` +
    `<td style="${cell}" class="ink line"><b>${escape(title)}</b>${more}${why}</td></tr>`
  );
}

const lines = (text: string) => escape(text).replaceAll('\n', '<br>');

function partHtml({ paragraphs, rows = [], link }: LetterPart): string {
  const table = rows.length
    ? `<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="border-top:2px solid ${ink};margin:0 0 20px">${rows.map(rowHtml).join('')}</table>`
    : '';
  return `${paragraphs.map((text) => paragraph(lines(text))).join('\n')}${table}${link ? linkHtml(link) : ''}`;
}

function linkHtml({ label, url, ends }: NonNullable<LetterPart['link']>): string {
  const href = escape(url);
  return [
    `<p style="margin:0 0 10px"><a href="${href}" class="act" style="display:inline-block;background:${copper};color:#FFFDF8;font-size:16px;font-weight:700;text-decoration:none;padding:12px 24px">${escape(label)}</a></p>`,
    `<p style="margin:0 0 20px;font-size:13px;line-height:20px;color:${quiet}" class="quiet">Or open <a href="${href}" style="color:${ink};word-break:break-all" class="ink">${href}</a>. ${escape(linkWords(ends))}</p>`,
  ].join('\n');
}

/** Text and HTML of a plain letter: both say everything. */
export function plainLetter(input: PlainLetterInput): PlainLetter {
  const { subject, recipientName, parts, sender, practice, foot, madeOn } = input;
  const text = [
    `${recipientName},`,
    ...parts.flatMap(partText),
    sender.length > 0 ? `With kind regards,\n${sender.join('\n')}` : practice,
    foot,
  ];
  const regards =
    sender.length > 0
      ? `With kind regards,<br><b>${escape(sender[0] ?? '')}</b>${sender
          .slice(1)
          .map((line) => `<br>${escape(line)}`)
          .join('')}`
      : escape(practice);
  const body = [
    `<h1 style="margin:12px 0 16px;font-size:22px;line-height:27px;font-weight:900;color:${ink}" class="ink">${escape(subject)}</h1>`,
    paragraph(`${escape(recipientName)},`),
    ...parts.map(partHtml),
    paragraph(regards),
    `<p style="margin:0;padding-top:12px;border-top:1px solid ${rule};font-size:12px;line-height:18px;color:${quiet}" class="quiet line">${escape(foot)}</p>`,
  ].join('\n');
  return {
    subject,
    text: `${text.join('\n\n')}\n`,
    html: letterFrame({ title: subject, practice, date: formatDate(madeOn), body }),
  };
}
