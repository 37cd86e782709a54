/** Text for one line: what a paste brings of line breaks and wide gaps becomes a space. */
export function oneLine(text: string): string {
	return text.replace(/\s+/g, ' ').trim();
}
