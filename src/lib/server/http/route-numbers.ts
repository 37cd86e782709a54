import { error } from '@sveltejs/kit';

/** The claim's number in an address; anything else is an address at which there is nothing. */
export function claimNumber(text: string): number {
	return numberIn(text, 'There is no such claim.');
}

/** The same of a task. */
export function taskNumber(text: string): number {
	return numberIn(text, 'There is no such task.');
}

/** A claim's number as a person types it, `12` or `#12`; NaN for what is none, which no claim has. */
export function typedNumber(text: string): number {
	const digits = /^#?([1-9]\d{0,8})$/.exec(text.trim())?.[1];
	return digits ? Number(digits) : NaN;
}

function numberIn(text: string, missing: string): number {
	if (!/^[1-9]\d{0,8}$/.test(text)) error(404, missing);
	return Number(text);
}
