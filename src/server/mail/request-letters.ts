import {
  aboutItem,
  filesCame,
  reminderOpening,
  reminderSubject,
  requestHow,
  requestOpening,
  requestSubject,
  sentBackOpening,
  type ItemWords,
  type RequestLetterContent,
} from '../../components/requests/letter-words';
import { formatCount } from '../../components/ui/format';
import { plainLetter, type LetterRow, type PlainLetter } from './plain-letter';

/** A request in a mail to one person, with the link that leads them to it. */
export interface AddressedRequest {
  content: RequestLetterContent;
  link: string;
  linkEnds: string | null;
}

const rowOf = (item: ItemWords): LetterRow => ({ title: item.words, about: aboutItem(item), reason: item.reason });

const linkOf = ({ link, linkEnds }: AddressedRequest, label: string) => ({ label, url: link, ends: linkEnds });

function around({ content }: AddressedRequest, madeOn: string) {
  const { recipientName, practice, by, client, site } = content;
  return {
    recipientName,
    practice: practice.name,
    sender: [by.name, [practice.name, practice.phone].filter(Boolean).join(', ')],
    foot: `You get this letter because you were named for ${client}, ${site}. Answer it to name somebody else.`,
    madeOn,
  };
}

/** The letter that asks for things. */
export function requestLetter(request: AddressedRequest, madeOn: string): PlainLetter {
  const { content } = request;
  const opening = [requestOpening(content), ...(content.note ? [content.note] : [])];
  return plainLetter({
    ...around(request, madeOn),
    subject: requestSubject(content),
    parts: [
      { paragraphs: opening, rows: content.items.map(rowOf) },
      { paragraphs: [requestHow], link: linkOf(request, 'Open the list') },
    ],
  });
}

/** One reminder for everything a person still has to answer. */
export function reminderLetter(requests: [AddressedRequest, ...AddressedRequest[]], madeOn: string): PlainLetter {
  const [first, ...more] = requests;
  const subject =
    more.length === 0
      ? reminderSubject(first.content, madeOn)
      : `Still needed for ${formatCount(requests.length, 'audit')} of power bills`;
  return plainLetter({
    ...around(first, madeOn),
    subject,
    parts: requests.map((request) => ({
      paragraphs: [reminderOpening(request.content, madeOn)],
      rows: request.content.items.map(rowOf),
      link: linkOf(request, 'Open the list'),
    })),
  });
}

/** The letter about one thing that came and does not do yet. */
export function sentBackLetter(request: AddressedRequest, madeOn: string): PlainLetter {
  const { content } = request;
  return plainLetter({
    ...around(request, madeOn),
    subject: `${content.site}: one thing needs another look`,
    parts: [
      {
        paragraphs: [sentBackOpening(content)],
        rows: content.items.map(rowOf),
        link: linkOf(request, 'Open the list'),
      },
    ],
  });
}

/** What came since the last mail, for the practice: one mail for many files. */
export interface ReceivedContent {
  recipientName: string;
  practice: string;
  code: string;
  client: string;
  site: string;
  number: number;
  items: { words: string; files: string[]; answer: string | null }[];
  /** How many things of the request are still open. */
  left: number;
  link: string;
}

/** The mail to the practice about what came. */
export function receivedLetter(content: ReceivedContent, madeOn: string): PlainLetter {
  const { client, site, code, number, items, left, recipientName, practice, link } = content;
  const files = items.reduce((sum, item) => sum + item.files.length, 0);
  const what = files > 0 ? `sent ${filesCame(files)}` : 'answered';
  const rest =
    left === 0 ? 'Everything in it is answered.' : `${formatCount(left, 'thing is', 'things are')} still open.`;
  return plainLetter({
    subject: `${code}: ${client} ${what} for request ${number}`,
    recipientName,
    parts: [
      {
        paragraphs: [`${client}, ${site}, ${what} for request ${number}. ${rest}`],
        rows: items.map(({ words, files: names, answer }) => ({
          title: words,
          about: names.join(', '),
          reason: answer && `Not there: ${answer}`,
        })),
        link: { label: 'Look at what came', url: link, ends: null },
      },
    ],
    sender: [],
    practice,
    foot: 'Nothing of it is kept in the audit before you take it into intake.',
    madeOn,
  });
}
