/** Characters of a kept name at most; file systems allow 255 bytes, and a character takes up to 4. */
export const NAME_LIMIT = 60;

/** What Windows takes for a device, whatever stands behind the dot (as Microsoft documents it). */
const RESERVED = /^(con|prn|aux|nul|conin\$|conout\$|com[0-9¹²³]|lpt[0-9¹²³])$/i;

/**
 * The name a download will have: without folders, without characters that hide what a name is
 * (controls, bidirectional and invisible ones), without what some file systems refuse. Null when
 * nothing is left. It never becomes a path here: the bytes stand under a generated key.
 */
export function cleanName(given: string): string | null {
	const last = given.split(/[/\\]/).findLast((part) => part.trim() !== '') ?? '';
	const plain = last
		.replace(/[\p{Cc}\p{Cf}\p{Cs}\p{Co}\p{Cn}\p{Zl}\p{Zp}]/gu, '')
		.normalize('NFC')
		.replace(/[<>:"|?*]/g, '_')
		.replace(/\p{Zs}+/gu, ' ')
		.replace(/^[. ]+|[. ]+$/g, '');
	if (plain === '') return null;
	const short = shortened(plain);
	const stem = short.split('.')[0] ?? '';
	return RESERVED.test(stem.trim()) ? `_${short}` : short;
}

/** Cut before the ending, which says what the file is. */
function shortened(name: string): string {
	const characters = [...name];
	if (characters.length <= NAME_LIMIT) return name;
	const dot = name.lastIndexOf('.');
	const ending = dot < 1 ? [] : [...name.slice(dot)];
	const kept = ending.length <= NAME_LIMIT / 2 ? ending : [];
	const stem = characters.slice(0, NAME_LIMIT - kept.length).join('');
	return `${stem.replace(/[. ]+$/, '')}${kept.join('')}`;
}
