import { aboutItem, requestHow, requestOpening, requestSubject, type RequestLetterContent } from './letter-words';

/** The mail as it goes, with its link left out. */
export function MailPreview({ content }: { content: RequestLetterContent }) {
  const { recipientName, note, items, by, practice } = content;
  return (
    <div className="mail-preview">
      <h3>{requestSubject(content)}</h3>
      <p>{recipientName},</p>
      <p>{requestOpening(content)}</p>
      {note && <p className="whitespace-pre-line">{note}</p>}
      <ol>
        {items.map((item, index) => (
          <li key={index}>
            <b>
              {index + 1}. {item.words || '...'}
            </b>
            <small>{aboutItem(item)}</small>
          </li>
        ))}
      </ol>
      <p>{requestHow}</p>
      <p className="hint">Here stands the link to the list; who has no password yet chooses one by it.</p>
      <p>
        With kind regards,
        <br />
        <b>{by.name}</b>
        <br />
        {[practice.name, practice.phone].filter(Boolean).join(', ')}
      </p>
    </div>
  );
}
