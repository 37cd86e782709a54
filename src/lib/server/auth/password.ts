import { hash, verify, type Options } from '@node-rs/argon2';

/**
 * OWASP's smallest setting takes 19 MiB and two passes; three passes take about 80 ms on the
 * machines this was measured on, which a person does not notice and a guesser does.
 */
const OPTIONS: Options = {
	// The library's default algorithm is Argon2id.
	memoryCost: 19_456,
	timeCost: 3,
	parallelism: 1
};

/** The same text typed on two keyboards (composed or not) is the same password. */
const canonical = (password: string) => password.normalize('NFKC');

/** @returns an Argon2id hash in its standard text form, with its parameters and a random salt */
export function hashPassword(password: string): Promise<string> {
	return hash(canonical(password), OPTIONS);
}

let nobody: Promise<string> | undefined;

/**
 * @param stored null when there is no such account: the check then takes the same time, so that
 * nobody learns from it which addresses have one
 */
export async function verifyPassword(stored: string | null, password: string): Promise<boolean> {
	nobody ??= hashPassword('no account has this password');
	const matches = await verify(stored ?? (await nobody), canonical(password));
	return stored !== null && matches;
}

/** True when a hash was made with weaker parameters than today's. */
export function needsRehash(stored: string): boolean {
	const found = /^\$argon2id\$v=19\$m=(\d+),t=(\d+),p=1\$/.exec(stored);
	if (!found) return true;
	return Number(found[1]) < 19_456 || Number(found[2]) < 3;
}
