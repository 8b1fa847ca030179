import type { EditionContent } from '../../schemas/edition';
import { formatCount, formatDate, formatLongDate, formatMajor, formatNumber } from '../../components/ui/format';
import { copper, escape, ink, letterFrame, paragraph, quiet, rule } from './letter-parts';
import { answer, bankCaution, comesBack, costNow, paybackFinding, pays } from '../../components/report/words';

export interface EditionLetterInput {
  content: EditionContent;
  recipientName: string;
  greeting: string;
  link: string;
  linkEnds: string | null;
}

export interface EditionLetter {
  subject: string;
  text: string;
  html: string;
}

/** Between which months eight of ten samples pay back. */
function spread(plan: EditionContent['plan']): [label: string, value: string][] {
  const { lowMonths, highMonths } = plan.paybackSpread ?? {};
  if (lowMonths == null || highMonths == null || highMonths === 0 || !pays(plan)) return [];
  return [['Eight of ten samples lie between', `${formatNumber(lowMonths)} and ${formatNumber(highMonths)} months`]];
}

/** What stands behind "Pays for itself". */
function paybackFigure({ paybackWords, economics }: EditionContent['plan']): string {
  if (paybackWords === 'never') return `not within ${formatCount(economics.horizonYears, 'year')}`;
  return paybackWords === 'at once' ? 'at once' : `in ${paybackWords}`;
}

/** The small table that says everything the picture says. */
function figures({ plan, currency }: EditionContent): [label: string, value: string][] {
  const whole = (amount: number) => formatMajor(amount, currency, { whole: true });
  const { horizonYears, discountPercent } = plan.economics;
  return [
    ['Saved on the bills, a year', whole(plan.saving)],
    ['The work, once', whole(plan.capitalCost)],
    ...((plan.economics.incentive ?? 0) > 0
      ? [['Incentive', whole(-(plan.economics.incentive ?? 0))] as [string, string]]
      : []),
    ['Pays for itself', paybackFigure(plan)],
    ...spread(plan),
    [
      `Worth today, ${horizonYears} years at ${formatNumber(discountPercent, { upTo: 1 })}\u00a0%`,
      whole(plan.appraisal.npv),
    ],
  ];
}

const settingCaution =
  'All settings are calculated values. Qualified persons review, set and commission them under your electrical safety rules and local codes; the manufacturer’s limits prevail. Use only released setting cards.';

const cautionOf = ({ plan }: EditionContent) => [settingCaution, bankCaution(plan)].filter(Boolean).join(' ');

function paragraphs(input: EditionLetterInput): string[] {
  const { content, greeting } = input;
  const { readings, site, bills } = content;
  const read = `we have read ${formatNumber(bills.length)} bills and ${formatNumber(readings.intervals - readings.missing)} meter readings of ${site.name}.`;
  return [...(greeting ? [greeting] : []), `${read} ${costNow(content)}`];
}

function linkWords({ linkEnds }: EditionLetterInput): string {
  return linkEnds
    ? `The link is yours alone and holds until ${formatLongDate(linkEnds)}.`
    : 'You are asked to sign in.';
}

function textOf(input: EditionLetterInput): string {
  const { content, recipientName, link } = input;
  const table = figures(content).map(([label, value]) => `  ${label}: ${value}`);
  return [
    answer(content),
    `Dear ${recipientName},`,
    ...paragraphs(input),
    paybackFinding(content),
    table.join('\n'),
    comesBack(content),
    `Read edition ${content.number}: ${link}\n${linkWords(input)}`,
    `Before settings are changed: ${cautionOf(content)}`,
    `With kind regards,\n${content.by}\n${content.practice.name}${content.practice.phone ? `, ${content.practice.phone}` : ''}`,
  ].join('\n\n');
}

function tableOf(content: EditionContent): string {
  const rows = figures(content).map(
    ([label, value]) =>
      `<tr><td style="padding:9px 0;border-bottom:1px solid ${rule};font-size:15px;color:${ink}" class="ink line">${escape(label)}</td>` +
      `<td align="right" style="padding:9px 0;border-bottom:1px solid ${rule};font-size:15px;font-weight:700;color:${ink};white-space:nowrap" class="ink line">${escape(value)}</td></tr>`,
  );
  return `<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="border-top:2px solid ${ink};margin:0 0 20px">${rows.join('')}</table>`;
}

function picture(content: EditionContent): string {
  const words = escape(`Payback chart. ${paybackFinding(content)}`);
  const image = (cid: string, kind: string, hidden: string) =>
    `<img src="cid:${cid}" class="${kind}" width="552" alt="${words}" style="width:100%;max-width:552px;height:auto;border:0;${hidden}">`;
  return `<div style="margin:0 0 16px">${image('payback', 'by-day', 'display:block;')}${image('payback-dark', 'by-night', 'display:none;')}</div>`;
}

function htmlOf(input: EditionLetterInput): string {
  const { content, recipientName, link } = input;
  const { practice, by, client, site } = content;
  const href = escape(link);
  const body = [
    `<h1 style="margin:12px 0 16px;font-size:26px;line-height:31px;font-weight:900;color:${ink}" class="ink">${escape(answer(content))}</h1>`,
    paragraph(`Dear ${escape(recipientName)},`),
    ...paragraphs(input).map((text) => paragraph(escape(text))),
    paragraph(`<b>${escape(paybackFinding(content))}</b>`),
    picture(content),
    tableOf(content),
    paragraph(escape(comesBack(content))),
    `<p style="margin:0 0 10px"><a href="${href}" class="act" style="display:inline-block;background:${copper};color:#FFFDF8;font-size:16px;font-weight:700;text-decoration:none;padding:12px 24px">Read edition ${content.number}</a></p>`,
    `<p style="margin:0 0 20px;font-size:13px;line-height:20px;color:${quiet}" class="quiet">Or open <a href="${href}" style="color:${ink};word-break:break-all" class="ink">${href}</a>. ${escape(linkWords(input))}</p>`,
    `<div style="border:1px solid #8A6100;border-left:6px solid #8A6100;background:#F8EED2;padding:12px 14px;margin:0 0 20px" class="warn"><b style="color:#8A6100;font-size:14px">Before settings are changed</b><p style="margin:4px 0 0;font-size:14px;line-height:20px;color:${ink}" class="ink">${escape(cautionOf(content))}</p></div>`,
    paragraph(
      `With kind regards,<br><b>${escape(by)}</b><br>${escape([practice.name, practice.phone].filter(Boolean).join(', '))}`,
    ),
    `<p style="margin:0;padding-top:12px;border-top:1px solid ${rule};font-size:12px;line-height:18px;color:${quiet}" class="quiet line">You get this letter because you receive reports for ${escape(client)}, ${escape(site.name)}. Ask us to name somebody else.</p>`,
  ].join('\n');
  return letterFrame({ title: subjectOf(content), practice: practice.name, date: formatDate(content.madeOn), body });
}

const subjectOf = ({ number, site, client }: EditionContent) =>
  `Power bills of ${client}, ${site.name}: edition ${number}`;

/** The letter to the client's person: says in words and a small table everything the picture says. */
export function editionLetter(input: EditionLetterInput): EditionLetter {
  return { subject: subjectOf(input.content), text: textOf(input), html: htmlOf(input) };
}
