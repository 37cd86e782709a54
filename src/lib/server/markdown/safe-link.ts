const PROTOCOLS: ReadonlySet<string> = new Set(['https:', 'http:', 'mailto:']);

const LONGEST_ADDRESS = 2_000;

/**
 * The address of a link that somebody typed, as the URL standard reads it; null for anything but a
 * whole `https:`, `http:` or `mailto:` address, and for one with a user name in it, which makes
 * another host look like the target.
 */
export function safeLink(address: string): string | null {
	if (address.length > LONGEST_ADDRESS) return null;
	let url: URL;
	try {
		url = new URL(address);
	} catch {
		return null;
	}
	if (!PROTOCOLS.has(url.protocol) || url.username || url.password) return null;
	// Fields of a mail (`bcc`, `body`) are nobody's to fill in for the reader.
	return url.protocol === 'mailto:' ? `mailto:${url.pathname}` : url.href;
}
