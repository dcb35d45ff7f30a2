import { sun } from '@shared/lib/sun';
import { env } from '../env';

export interface LetterParts {
  heading: string;
  /** Plain sentences; everything is escaped. */
  paragraphs: string[];
  /** The one thing to do. */
  action?: { label: string; url: string };
  /** Label and value, set as a small table before the action. */
  facts?: [label: string, value: string][];
  /** Further sentences after the action. */
  after?: string[];
  footer?: string;
}

export const escapeHtml = (text: string): string =>
  text.replace(
    /[&<>"']/g,
    (c) => ({ '&': '&amp;', '<': '&lt;', '>': '&gt;', '"': '&quot;', "'": '&#39;' })[c] as string,
  );

/** Plain text and HTML of a letter from one source: one column, serif title, the house's colours, nothing loaded from anywhere. */
export function layoutLetter(parts: LetterParts): { text: string; html: string } {
  refuseMissing(parts);
  return { text: plain(parts), html: html(parts) };
}

/** A value that is not there stops the letter by name, before anybody is written to; types alone do not stop a template literal. */
function refuseMissing({ heading, paragraphs, action, facts, after }: LetterParts): void {
  const needed: [string, unknown][] = [
    ['heading', heading],
    ...(action
      ? ([
          ['action', action.label],
          ['address of the action', action.url],
        ] as [string, unknown][])
      : []),
  ];
  const others: [string, unknown][] = [
    ...[...paragraphs, ...(after ?? [])].map((text, index): [string, unknown] => [
      `paragraph ${index + 1}`,
      text,
    ]),
    ...(facts ?? []).map(([label, value]): [string, unknown] => [label, value]),
  ];
  const lacks = ([, value]: [string, unknown]): boolean =>
    typeof value !== 'string' || value === 'undefined' || value === 'null';
  const missing = needed.find(([, value]) => !value) ?? [...needed, ...others].find(lacks);
  if (missing) throw new Error(`letter: no ${missing[0]}`);
}

function plain({ heading, paragraphs, action, facts, after, footer }: LetterParts): string {
  const width = Math.max(0, ...(facts ?? []).map(([label]) => label.length));
  const blocks = [
    heading,
    ...paragraphs,
    ...(facts?.length
      ? [facts.map(([label, value]) => `${`${label}:`.padEnd(width + 2)}${value}`).join('\n')]
      : []),
    ...(action ? [`${action.label}:\n${action.url}`] : []),
    ...(after ?? []),
    `-- \n${footer ?? env.INSTITUTE_NAME}\n${env.OFFICE_EMAIL}`,
  ];
  return `${blocks.join('\n\n')}\n`;
}

/** The sun's height of the day on a rule from midwinter to midsummer. A table, because mail programs show neither SVG nor positions. */
function markOfTheDay(now: Date): string {
  const share = Math.round((50 * (sun(now).declination + 23.44)) / 23.44);
  const cell = (width: number): string =>
    `<td style="width:${Math.min(100, Math.max(0, width))}%;padding:0"><div style="border-top:1px solid #13201b;font-size:0;line-height:0">&nbsp;</div></td>`;
  const disc =
    '<td style="padding:0"><div style="width:9px;height:9px;border-radius:5px;background:#b97500;font-size:0;line-height:0">&nbsp;</div></td>';
  return `<table role="presentation" aria-hidden="true" cellspacing="0" cellpadding="0" style="width:120px;border-collapse:collapse;margin:0 0 14px"><tr>${cell(share)}${disc}${cell(100 - share)}</tr></table>
`;
}

const SERIF = "'STIX Two Text',Georgia,'Times New Roman',serif";
const SANS = "'IBM Plex Sans',system-ui,-apple-system,'Segoe UI',sans-serif";

function html({ heading, paragraphs, action, facts, after, footer }: LetterParts): string {
  const p = (text: string): string =>
    `<p style="margin:0 0 14px">${escapeHtml(text).replace(/\n/g, '<br>')}</p>`;
  const rows = (facts ?? []).map(
    ([label, value]) =>
      `<tr><td style="padding:6px 16px 6px 0;border-bottom:1px solid #cfd6ce;color:#586660;vertical-align:top">${escapeHtml(label)}</td><td style="padding:6px 0;border-bottom:1px solid #cfd6ce">${escapeHtml(value)}</td></tr>`,
  );
  const table = rows.length
    ? `<table role="presentation" cellspacing="0" style="border-top:2px solid #13201b;border-bottom:2px solid #13201b;border-collapse:collapse;width:100%;margin:0 0 18px;font-size:14px">${rows.join('')}</table>`
    : '';
  const button = action
    ? `<p style="margin:6px 0 20px"><a href="${escapeHtml(action.url)}" style="display:inline-block;background:#0e4f5e;color:#ffffff;font-weight:600;text-decoration:none;padding:11px 18px;border-radius:3px">${escapeHtml(action.label)}</a></p><p style="margin:0 0 16px;font-size:12px;color:#586660;word-break:break-all">${escapeHtml(action.url)}</p>`
    : '';
  return `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width,initial-scale=1"><title>${escapeHtml(heading)}</title></head>
<body style="margin:0;background:#f4f6f2;color:#13201b;font:15px/1.5 ${SANS}"><div style="max-width:560px;margin:0 auto;padding:28px 22px;background:#fcfdfb">
${markOfTheDay(new Date())}<p style="margin:0 0 6px;font-size:13px;color:#586660">${escapeHtml(env.INSTITUTE_NAME)}</p>
<h1 style="font:500 24px/1.25 ${SERIF};margin:0 0 18px">${escapeHtml(heading)}</h1>
${paragraphs.map(p).join('\n')}${table}${button}${(after ?? []).map(p).join('\n')}
<p style="margin:24px 0 0;padding-top:12px;border-top:1px solid #cfd6ce;font-size:12px;color:#586660">${escapeHtml(footer ?? env.INSTITUTE_NAME)}<br>${escapeHtml(env.OFFICE_EMAIL)}</p>
</div></body></html>`;
}
