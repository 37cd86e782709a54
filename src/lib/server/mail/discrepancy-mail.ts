import type { Verdict } from '../../ledger/verdict';
import { escapeHtml } from './escape-html';

export interface DiscrepancyMail {
	readonly name: string;
	readonly groupName: string;
	readonly number: number;
	/** `Quantum maximum of CHSH`. */
	readonly title: string;
	readonly relation: string;
	readonly printed: string;
	readonly reference: string;
	readonly locator: string;
	readonly verdict: Verdict;
	readonly link: string;
}

export interface RenderedMail {
	readonly subject: string;
	readonly text: string;
	readonly html: string;
}

const MOST_DIAGNOSES = 3;
const WRAP = 72;
const RELATION_WORD: Readonly<Record<string, string>> = { '=': '=', '<=': '≤', '>=': '≥' };

/** The mail that says a recomputation disagrees: the same facts as text and as HTML. */
export function renderDiscrepancy(mail: DiscrepancyMail): RenderedMail {
	const { verdict } = mail;
	const rows = figures(mail);
	const width = Math.max(...rows.map(([label]) => label.length));
	const suggestions = verdict.diagnosis.slice(0, MOST_DIAGNOSES);
	const text = [
		`${mail.title}: does not reproduce as entered.`,
		'',
		...rows.map(([label, value]) => `  ${label.padEnd(width)}  ${value}`),
		'',
		...wrap(verdict.reason),
		...(suggestions.length > 0 ? ['', 'It would agree if:'] : []),
		...suggestions.flatMap(({ text: suggestion }) => wrap(suggestion, '  - ', '    ')),
		'',
		`Reference: ${mail.reference}, ${mail.locator}`,
		`Claim ${mail.number}: ${mail.link}`,
		'',
		...wrap(whyYou(mail))
	].join('\n');
	return { subject: subjectOf(mail), text, html: html(mail, rows) };
}

function subjectOf(mail: DiscrepancyMail): string {
	// A header holds one line, whatever the subject's name is.
	return `Discrepancy: ${mail.title}, claim ${mail.number}`.replace(/\s+/g, ' ').slice(0, 150);
}

function figures({ relation, printed, verdict }: DiscrepancyMail): [string, string][] {
	const claimed = `${RELATION_WORD[relation] ?? relation} ${printed}`;
	const rows: [string, string][] = [['Claimed', relation === '=' ? printed : claimed]];
	const found = verdict.enclosure;
	if (!found) return rows;
	const guaranteed = found.worth === 'guaranteed' ? 'guaranteed' : found.worth;
	if (found.exact !== null) rows.push(['Recomputed (exact)', found.exact]);
	else {
		if (found.upper !== null) rows.push([`At most (${guaranteed})`, found.upper]);
		if (found.lower !== null) rows.push([`At least (${guaranteed})`, found.lower]);
	}
	return rows;
}

const whyYou = ({ groupName }: DiscrepancyMail) =>
	`You get this because you entered the claim or look after the ledger of ${groupName}.`;

function wrap(paragraph: string, first = '', rest = ''): string[] {
	const lines: string[] = [];
	let line = first;
	for (const word of paragraph.split(/\s+/)) {
		const empty = line === first || line === rest;
		if (!empty && line.length + word.length + 1 > WRAP) {
			lines.push(line);
			line = rest + word;
		} else line += (empty ? '' : ' ') + word;
	}
	return [...lines, line];
}

/** Mail programs read neither style sheets nor variables, so the palette's values stand here. */
const COLOUR = {
	ground: '#f3f5f3',
	sheet: '#ffffff',
	ink: '#14211e',
	quiet: '#55645f',
	line: '#d6ddd9',
	accent: '#0e5a63',
	discrepancy: '#a5331b',
	discrepancySoft: '#f9e6df',
	openSoft: '#f6edcf'
} as const;
const TEXT = "font-family:'Atkinson Hyperlegible Next',Verdana,sans-serif";
const MONO = "font-family:'Atkinson Hyperlegible Mono',Consolas,monospace";

function html(mail: DiscrepancyMail, rows: readonly (readonly [string, string])[]): string {
	const e = escapeHtml;
	const figureRows = rows
		.map(
			([label, value], index) =>
				`<tr><td style="padding:2px 16px 2px 0;color:${COLOUR.quiet};font-size:13px">${e(label)}</td>` +
				`<td style="padding:2px 0;${MONO};font-size:18px;${index === 0 ? `color:${COLOUR.discrepancy};font-weight:700` : ''}">${e(value)}</td></tr>`
		)
		.join('');
	const diagnosis = mail.verdict.diagnosis
		.slice(0, MOST_DIAGNOSES)
		.map(({ text }) => `<li style="margin:4px 0">${e(text)}</li>`)
		.join('');
	return [
		'<!doctype html><html lang="en"><head><meta charset="utf-8">',
		`<title>${e(subjectOf(mail))}</title></head>`,
		`<body style="margin:0;padding:24px;background:${COLOUR.ground};color:${COLOUR.ink};${TEXT};font-size:15px;line-height:1.5">`,
		`<div style="max-width:560px;margin:0 auto;padding:24px;background:${COLOUR.sheet};border:1px solid ${COLOUR.line};border-radius:8px">`,
		`<p style="margin:0 0 8px"><span style="display:inline-block;padding:2px 8px;border-radius:6px;background:${COLOUR.discrepancySoft};color:${COLOUR.discrepancy};font-weight:700">≠ Discrepancy</span></p>`,
		`<h1 style="margin:0 0 16px;font-family:'STIX Two Text',Georgia,serif;font-weight:400;font-size:24px">${e(mail.title)}</h1>`,
		`<table role="presentation" style="border-collapse:collapse">${figureRows}</table>`,
		`<p>${e(mail.verdict.reason)}</p>`,
		diagnosis
			? `<div style="padding:8px 16px;background:${COLOUR.openSoft};border-radius:6px"><strong>It would agree if</strong><ul style="margin:4px 0;padding-left:20px">${diagnosis}</ul></div>`
			: '',
		`<p style="color:${COLOUR.quiet}">${e(mail.reference)}, ${e(mail.locator)}</p>`,
		`<p><a href="${e(mail.link)}" style="color:${COLOUR.accent}">Open claim ${mail.number}</a></p>`,
		`<p style="color:${COLOUR.quiet};font-size:13px;margin-bottom:0">${e(whyYou(mail))}</p>`,
		'</div></body></html>'
	].join('');
}
