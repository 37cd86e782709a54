import { escapeHtml as e } from './escape-html';
import type { Figure, MailContent, MailFooter, MailSection, Tone } from './mail-content';

/** Mail programs read neither style sheets nor variables, so the palette's values stand here. */
const COLOUR = {
	ground: '#f3f5f3',
	sheet: '#ffffff',
	ink: '#14211e',
	quiet: '#55645f',
	line: '#d6ddd9',
	faint: '#e8ecea',
	accent: '#0e5a63',
	openSoft: '#f6edcf'
} as const;
const TONES: Readonly<Record<Tone, { readonly ink: string; readonly soft: string }>> = {
	plain: { ink: '#0e5a63', soft: '#dcebec' },
	agreement: { ink: '#2b6a36', soft: '#e2efe1' },
	discrepancy: { ink: '#a5331b', soft: '#f9e6df' },
	open: { ink: '#785a08', soft: '#f6edcf' }
};
const TEXT = "font-family:'Atkinson Hyperlegible Next',Verdana,sans-serif";
const MONO = "font-family:'Atkinson Hyperlegible Mono',Consolas,monospace";
const SERIF = "font-family:'STIX Two Text',Georgia,serif";
const SMALL = `font-size:13px;line-height:20px;color:${COLOUR.quiet}`;

/** Tables and inline styles only, which every mail program draws; nothing is fetched. */
export function frameHtml(content: MailContent, subject: string): string {
	const tone = TONES[content.tag.tone];
	const { figures = [], facts = [], sections = [], list, quote } = content;
	return [
		'<!doctype html><html lang="en"><head><meta charset="utf-8">',
		'<meta name="viewport" content="width=device-width">',
		'<meta name="color-scheme" content="light">',
		`<title>${e(subject)}</title></head>`,
		`<body style="margin:0;padding:0;background:${COLOUR.ground}">`,
		`<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="background:${COLOUR.ground}"><tr><td align="center" style="padding:24px 12px">`,
		`<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="max-width:580px;background:${COLOUR.sheet};border:1px solid ${COLOUR.line};border-radius:8px"><tr><td align="left" style="padding:24px;${TEXT};font-size:15px;line-height:23px;color:${COLOUR.ink};word-break:break-word">`,
		`<p style="margin:0 0 10px"><span style="background:${tone.soft};color:${tone.ink};padding:3px 8px;border-radius:6px;font-size:13px;font-weight:700">${e(content.tag.text)}</span></p>`,
		`<h1 style="margin:0 0 16px;${SERIF};font-weight:400;font-size:24px;line-height:30px">${e(content.heading)}</h1>`,
		figureTable(figures, tone.ink),
		...content.paragraphs.map((text) => `<p style="margin:0 0 14px">${e(text)}</p>`),
		list && list.items.length > 0 ? listBox(list.title, list.items) : '',
		quote ? quoteBox(quote.title, quote.text) : '',
		factTable(facts),
		...sections.map(section),
		button(content.action),
		'</td></tr></table>',
		footer(content.footer),
		'</td></tr></table></body></html>'
	].join('');
}

function figureTable(figures: readonly Figure[], ink: string): string {
	if (figures.length === 0) return '';
	const rows = figures.map(
		({ label, value, strong }) =>
			`<tr><td style="padding:2px 16px 2px 0;${SMALL};white-space:nowrap" valign="top">${e(label)}</td>` +
			`<td style="padding:2px 0;${MONO};font-size:18px;line-height:24px;${strong ? `color:${ink};font-weight:700` : ''}">${e(value)}</td></tr>`
	);
	return `<table role="presentation" cellpadding="0" cellspacing="0" style="margin:0 0 14px">${rows.join('')}</table>`;
}

function factTable(facts: readonly (readonly [string, string])[]): string {
	if (facts.length === 0) return '';
	const rows = facts.map(
		([label, value]) =>
			`<tr><td style="padding:3px 16px 3px 0;${SMALL};white-space:nowrap" valign="top">${e(label)}</td>` +
			`<td style="padding:3px 0" valign="top">${e(value)}</td></tr>`
	);
	return `<table role="presentation" cellpadding="0" cellspacing="0" style="margin:0 0 14px">${rows.join('')}</table>`;
}

function listBox(title: string, items: readonly string[]): string {
	const lines = items.map((item) => `<li style="margin:4px 0">${e(item)}</li>`);
	return `<div style="margin:0 0 14px;padding:8px 16px;background:${COLOUR.openSoft};border-radius:6px"><strong>${e(title)}</strong><ul style="margin:4px 0;padding-left:20px">${lines.join('')}</ul></div>`;
}

function quoteBox(title: string, text: string): string {
	const lines = text.split(/\r\n|\r|\n/).map(e);
	return `<p style="margin:0 0 4px;${SMALL}">${e(title)}</p><div style="margin:0 0 14px;padding:8px 16px;border-left:3px solid ${COLOUR.line};background:${COLOUR.ground}">${lines.join('<br>')}</div>`;
}

function section({ title, parts }: MailSection): string {
	const body = parts.map(({ title: kind, items }) => {
		const lines = items.map(
			({ text, detail, address }) =>
				`<li style="margin:0 0 8px"><a href="${e(address)}" style="color:${COLOUR.accent}">${e(text)}</a>` +
				(detail ? `<br><span style="${SMALL}">${e(detail)}</span>` : '') +
				'</li>'
		);
		return `<h3 style="margin:0 0 4px;${SMALL};font-weight:700">${e(kind)}</h3><ul style="margin:0 0 12px;padding-left:20px">${lines.join('')}</ul>`;
	});
	return `<h2 style="margin:8px 0 10px;padding-top:12px;border-top:1px solid ${COLOUR.line};font-size:18px;line-height:24px">${e(title)}</h2>${body.join('')}`;
}

function button({ label, address }: MailContent['action']): string {
	return `<table role="presentation" cellpadding="0" cellspacing="0" style="margin:8px 0 0"><tr><td style="background:${COLOUR.accent};border-radius:6px"><a href="${e(address)}" style="display:inline-block;padding:11px 18px;color:#ffffff;font-weight:700;text-decoration:none">${e(label)}</a></td></tr></table>`;
}

function footer({ why, choices, unsubscribe }: MailFooter): string {
	const link = (address: string, label: string) =>
		`<a href="${e(address)}" style="color:${COLOUR.quiet}">${e(label)}</a>`;
	const links = [
		...(choices ? [link(choices, 'Choose what comes by mail')] : []),
		...(unsubscribe ? [link(unsubscribe, 'No more of these')] : [])
	];
	return `<table role="presentation" width="100%" cellpadding="0" cellspacing="0" style="max-width:580px"><tr><td align="left" style="padding:14px 24px;${TEXT};${SMALL}">${e(why)}${links.length > 0 ? `<br>${links.join(' &middot; ')}` : ''}</td></tr></table>`;
}
