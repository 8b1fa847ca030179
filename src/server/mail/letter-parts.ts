/** Colours of the house by day; by night the frame's one style block sets the others. */
export const ink = '#1C2A30';
export const quiet = '#4F5B60';
export const copper = '#A34E1F';
export const rule = '#D8D0C0';

/** A text as it may stand in HTML. */
export const escape = (text: string) =>
  text.replaceAll('&', '&amp;').replaceAll('<', '&lt;').replaceAll('>', '&gt;').replaceAll('"', '&quot;');

/** A paragraph of a letter. */
export const paragraph = (html: string, style = '') =>
  `<p style="margin:0 0 16px;font-size:16px;line-height:24px;color:${ink};${style}" class="ink">${html}</p>`;

const nightStyle = `<style>
:root { color-scheme: light dark; supported-color-schemes: light dark; }
@media (prefers-color-scheme: dark) {
  .paper { background: #14191C !important; }
  .letter { background: #1C2327 !important; border-color: #E08A55 #333D42 #333D42 !important; }
  .ink { color: #E9E4D8 !important; }
  .quiet { color: #AEB4B1 !important; }
  .line { border-color: #333D42 !important; }
  .warn { background: #383019 !important; border-color: #E0B84C !important; }
  .warn b { color: #E0B84C !important; }
  .act { background: #E08A55 !important; color: #14191C !important; }
  .by-day { display: none !important; }
  .by-night { display: block !important; }
}
@media (max-width: 480px) { .letter-pad { padding: 20px 16px !important; } }
</style>`;

/** The frame of every letter in HTML: one column of 600, practice and date above. */
export function letterFrame(given: { title: string; practice: string; date: string; body: string }): string {
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width"><meta name="color-scheme" content="light dark"><title>${escape(given.title)}</title>${nightStyle}</head>
<body class="paper" style="margin:0;padding:24px 0;background:#F6F3EC;font-family:Lato,'Segoe UI',Helvetica,Arial,sans-serif">
<table role="presentation" align="center" width="600" cellpadding="0" cellspacing="0" class="letter" style="width:100%;max-width:600px;background:#FFFDF8;border:1px solid ${rule};border-top:7px solid ${copper}"><tr><td class="letter-pad" style="padding:20px 24px">
<table role="presentation" width="100%" cellpadding="0" cellspacing="0"><tr><td style="font-size:14px;font-weight:700;color:${ink}" class="ink">${escape(given.practice)}</td><td align="right" style="font-size:13px;color:${quiet}" class="quiet">${given.date}</td></tr></table>
${given.body}
</td></tr></table></body></html>`;
}
