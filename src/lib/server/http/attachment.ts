/**
 * `Content-Disposition` of a file to be saved (RFC 6266): the name in ASCII for old programs, and
 * whole in the encoding of RFC 8187. The name was cleaned before; here nothing may end the header.
 */
export function attachment(name: string): string {
	const plain = [...name]
		.map((character) => (/[ !#-$&-[\]-~]/.test(character) ? character : '_'))
		.join('');
	// encodeURIComponent leaves some characters that are no attr-char of RFC 8187.
	const whole = encodeURIComponent(name.replace(/\p{Cs}/gu, '_')).replace(
		/['()*]/g,
		(character) => `%${character.charCodeAt(0).toString(16).toUpperCase()}`
	);
	return `attachment; filename="${plain}"; filename*=UTF-8''${whole}`;
}

/** Headers of a file that somebody handed in: it runs nothing and is taken for nothing else. */
export function attachmentHeaders(name: string, mediaType: string, bytes: number) {
	return {
		'Content-Type': mediaType,
		'Content-Length': String(bytes),
		'Content-Disposition': attachment(name),
		'Content-Security-Policy': "default-src 'none'; frame-ancestors 'none'; sandbox",
		'X-Content-Type-Options': 'nosniff',
		'Cache-Control': 'private, no-store'
	};
}
