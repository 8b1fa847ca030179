import { describe, expect, it } from 'vitest';
import { editionLetter } from '@/server/mail/edition-letter';
import { renderLeaves } from '@/server/reports/render';
import { buildEditionContent } from '../setup/edition';

const plain = (text: string) => text.replaceAll('\u00a0', ' ');
const input = {
  content: buildEditionContent(),
  recipientName: 'Mira Oyelade',
  greeting: '',
  link: 'http://127.0.0.1:4321/invitation/abc',
  linkEnds: '2026-12-15T10:00:00Z',
};

describe('editionLetter', () => {
  it('says in words everything the picture says, in both parts', () => {
    const { text, html, subject } = editionLetter(input);
    for (const part of [text, html].map(plain)) {
      expect(part).toContain('60,000 USD');
      expect(part).toContain('90,000 USD');
      expect(part).toContain('18 months');
      expect(part).toContain('72,000 USD a year for poor power factor');
      expect(part).toContain(input.link);
      expect(part).toContain('Qualified persons review, set and commission them');
    }
    expect(subject).toBe('Power bills of Kestrel Gap Lime & Stone, Works 2: edition 1');
  });

  it('shows the picture by its content id in light and dark with the finding as its words', () => {
    const { html } = editionLetter(input);
    expect(html).toContain('src="cid:payback"');
    expect(html).toContain('src="cid:payback-dark"');
    expect(plain(html)).toContain('alt="Payback chart. After 18 months the saving has paid for the work');
  });

  it('tells the day the link ends, or that one signs in', () => {
    expect(editionLetter(input).text).toContain('holds until Tue 15 Dec 2026');
    expect(editionLetter({ ...input, linkEnds: null }).text).toContain('You are asked to sign in.');
  });

  it('lets no name or greeting become markup', () => {
    const { html } = editionLetter({ ...input, recipientName: '<b>"M"</b>', greeting: '<script>x</script>' });
    expect(html).not.toContain('<script>');
    expect(html).toContain('&lt;b&gt;&quot;M&quot;&lt;/b&gt;');
  });

  it('says of work that costs nothing that nothing has to be bought', () => {
    const content = buildEditionContent();
    const free = { ...content.plan, capitalCost: 0, paybackWords: 'at once' };
    const { text } = editionLetter({ ...input, content: { ...content, plan: free } });
    expect(text).toMatch(/Nothing has to be bought; after \d+ years? you are [\d,]+\u00a0USD ahead\./);
  });

  it('recommends nothing where a plan does not pay', () => {
    const content = buildEditionContent();
    const losing = { ...content.plan, saving: -100, appraisal: { ...content.plan.appraisal, npv: -90_671 } };
    expect(editionLetter({ ...input, content: { ...content, plan: losing } }).text).toMatch(
      /^Leave the fields as they are/,
    );
  });
});

describe('renderLeaves', () => {
  it('freezes six pages that name client, edition and digest', () => {
    const html = renderLeaves({
      content: input.content,
      pictures: { bills: '<svg id="drawn"></svg>' },
      digest: '9f3c 41d7',
    });
    expect(html.match(/<article class="leaf"/g)).toHaveLength(6);
    expect(html.match(/digest 9f3c 41d7/g)).toHaveLength(6);
    expect(html).toContain('<svg id="drawn"></svg>');
    expect(html).toContain('Not released');
  });
});
