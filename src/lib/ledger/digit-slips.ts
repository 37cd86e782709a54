import type { DecimalForm } from './decimal-form';

/** What was printed with some of its digits changed. */
function withDigits(printed: string, changes: ReadonlyMap<number, string>): string {
	return Array.from({ length: printed.length }, (_, i) => changes.get(i) ?? printed.charAt(i)).join(
		''
	);
}

/** The printed value with two neighbouring digits swapped, every way that changes it. */
export function swappedDigits(printed: string, { digitsAt }: DecimalForm): string[] {
	const found: string[] = [];
	for (let i = 0; i + 1 < digitsAt.length; i++) {
		const [left, right] = [digitsAt[i] ?? 0, digitsAt[i + 1] ?? 0];
		const [a, b] = [printed.charAt(left), printed.charAt(right)];
		if (a === b) continue;
		found.push(
			withDigits(
				printed,
				new Map([
					[left, b],
					[right, a]
				])
			)
		);
	}
	return found;
}

/**
 * The printed value with a digit put in anywhere before its last one: behind it a digit would only
 * say more precisely what is printed.
 */
export function insertedDigits(printed: string, { digitsAt }: DecimalForm): string[] {
	const found = new Set<string>();
	for (const at of digitsAt)
		for (let digit = 0; digit <= 9; digit++)
			found.add(withDigits(printed, new Map([[at, `${digit}${printed.charAt(at)}`]])));
	found.delete(printed);
	return [...found];
}

/** The printed value with one digit replaced, never the last: almost anything is one digit away. */
export function replacedDigits(printed: string, { digitsAt }: DecimalForm): string[] {
	const found: string[] = [];
	for (const at of digitsAt.slice(0, -1)) {
		for (let digit = 0; digit <= 9; digit++) {
			if (String(digit) !== printed.charAt(at))
				found.push(withDigits(printed, new Map([[at, String(digit)]])));
		}
	}
	return found;
}
