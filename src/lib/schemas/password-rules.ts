/** NIST SP 800-63B-4, section 3.1.1.2: a password that is the only factor has at least 15 characters. */
export const PASSWORD_LENGTH = { min: 15, max: 128 } as const;

/**
 * What people type when they are asked for 15 characters: runs, rows of the keyboard, a word and
 * its year. Compared without case, spaces and punctuation, so that each stands for many.
 */
const COMMON = [
	'123456789012345',
	'1234567890123456',
	'12345678901234567890',
	'abcdefghijklmno',
	'abcdefghijklmnopqrstuvwxyz',
	'qwertyuiopasdfg',
	'qwertyuiopasdfghjkl',
	'qwertyuiopasdfghjklzxcvbnm',
	'1q2w3e4r5t6y7u8i',
	'1qaz2wsx3edc4rfv',
	'1qaz2wsx3edc4rfv5tgb',
	'qazwsxedcrfvtgb',
	'passwordpassword',
	'password12345678',
	'password123456789',
	'password1234567890',
	'mypasswordissecret',
	'thisismypassword',
	'thisisapassword',
	'thisisnotapassword',
	'iloveyouiloveyou',
	'letmeinletmein1',
	'administrator123',
	'correcthorsebatterystaple',
	'changemechangeme',
	'pleasechangemenow',
	'quantummechanics',
	'bellinequalities',
	'bellinequality1',
	'spookyactionatadistance',
	'godplaysnodice'
];

const plain = (text: string) =>
	text
		.normalize('NFKC')
		.toLowerCase()
		.replace(/[^\p{L}\p{N}]/gu, '');

/** True for one short piece over and over, whatever its end: `abcabcabcabcabc`, `aaaaaaaaaaaaaaa`. */
function repeats(text: string): boolean {
	for (let period = 1; period <= Math.min(5, text.length / 3); period++) {
		const piece = text.slice(0, period);
		if (piece.repeat(Math.ceil(text.length / period)).startsWith(text)) return true;
	}
	return false;
}

/** What is wrong with a password, in words for the person who chose it; null: nothing. */
export function passwordProblem(
	password: string,
	about: { readonly email?: string; readonly name?: string } = {}
): string | null {
	const length = [...password.normalize('NFKC')].length;
	if (length < PASSWORD_LENGTH.min) {
		return `Use at least ${PASSWORD_LENGTH.min} characters; a few unrelated words do well`;
	}
	if (length > PASSWORD_LENGTH.max) return `Use at most ${PASSWORD_LENGTH.max} characters`;
	const bare = plain(password);
	if (COMMON.includes(bare)) return 'Too many people use this password; choose another';
	if (repeats(bare)) return 'This repeats itself; choose something less regular';
	const [local = '', domain = ''] = (about.email ?? '').split('@');
	const own = [local, domain.split('.')[0] ?? '', about.name ?? '', 'merestone']
		.map(plain)
		.filter((word) => word.length >= 4);
	const rest = own.reduce((text, word) => text.replaceAll(word, ''), bare);
	if (rest.length < 8 && rest !== bare) {
		return 'This is mostly your name, your address or the name of this site; choose another';
	}
	return null;
}
