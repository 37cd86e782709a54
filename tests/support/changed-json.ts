import fc from 'fast-check';

/** Any JSON: what a stored file may hold. */
export type Json = null | boolean | number | string | Json[] | { [key: string]: Json };
export type Path = readonly (string | number)[];

export const asJson = (value: unknown): Json => JSON.parse(JSON.stringify(value));

/** Every place in a JSON value, as its path; the whole is the empty path. */
export function pathsOf(value: Json, path: Path = []): Path[] {
	if (value === null || typeof value !== 'object') return [path];
	const entries = Array.isArray(value) ? [...value.entries()] : Object.entries(value);
	return [path, ...entries.flatMap(([key, inner]) => pathsOf(inner, [...path, key]))];
}

export function valueAt(value: Json, path: Path): Json {
	return path.reduce<Json>((inner, key) => {
		if (Array.isArray(inner)) return inner[Number(key)] ?? null;
		return inner !== null && typeof inner === 'object' ? (inner[key] ?? null) : null;
	}, value);
}

/** A copy with one place changed. */
export function changedAt(value: Json, [key, ...rest]: Path, by: (old: Json) => Json): Json {
	if (key === undefined) return by(value);
	if (Array.isArray(value))
		return value.map((inner, i) => (i === key ? changedAt(inner, rest, by) : inner));
	if (value === null || typeof value !== 'object') return value;
	return { ...value, [key]: changedAt(value[key] ?? null, rest, by) };
}

/** Draws from 0 to count - 1. */
type Draw = (count: number) => number;

/** One slip of a pen or of a disk, by the type of what stands there. */
function slip(old: Json, draw: Draw): Json {
	if (old === null) return draw(2) === 0 ? 0 : [];
	if (typeof old === 'boolean') return !old;
	if (typeof old === 'number') return slippedNumber(old, draw);
	if (typeof old === 'string') return slippedText(old, draw);
	if (Array.isArray(old)) return slippedList(old, draw);
	return slippedObject(old, draw);
}

function slippedNumber(old: number, draw: Draw): Json {
	const nudged = Number.isInteger(old) ? [old + 1, old - 1, old + 2, old - 2] : [];
	const others = [old * (1 + 2 ** -40), old + 1e-7, old - 1e-3, -old, 0, 2 * old, `${old}`, null];
	const choices = [...nudged, ...others];
	return choices[draw(choices.length)] ?? null;
}

function slippedText(old: string, draw: Draw): Json {
	const at = draw(old.length + 1);
	const digit = String(draw(10));
	switch (draw(6)) {
		case 0:
			return old.startsWith('-') ? old.slice(1) : `-${old}`;
		case 1: // one digit more
			return old.slice(0, at) + digit + old.slice(at);
		case 2: // one character less
			return old.slice(0, at) + old.slice(at + 1);
		case 3:
			return Number(old);
		default: // another digit
			return old.replace(/\d/g, (d, place: number) => (place === at ? digit : d));
	}
}

function slippedList(old: readonly Json[], draw: Draw): Json {
	const at = draw(Math.max(1, old.length));
	const other = draw(Math.max(1, old.length));
	const [one, two] = [old[at] ?? null, old[other] ?? null];
	switch (draw(4)) {
		case 0:
			return old.filter((_, i) => i !== at);
		case 1:
			return [...old.slice(0, at), one, ...old.slice(at)];
		case 2:
			return old.map((inner, i) => (i === at ? two : i === other ? one : inner));
		default:
			return draw(4) === 0 ? [] : old.map((inner, i) => (i === at ? two : inner));
	}
}

function slippedObject(old: Readonly<Record<string, Json>>, draw: Draw): Json {
	const entries = Object.entries(old);
	const at = draw(Math.max(1, entries.length));
	const other = entries[draw(Math.max(1, entries.length))];
	const changed = entries.flatMap(([key, inner], i): [string, Json][] => {
		if (i !== at) return [[key, inner]];
		switch (draw(4)) {
			case 0:
				return [];
			case 1: // another name, of the same kind where there are several
				return [[String(slippedText(key, draw)), inner]];
			case 2:
				return [[key, other?.[1] ?? null]];
			default:
				return [[other?.[0] ?? 'x', inner]];
		}
	});
	return Object.fromEntries(changed);
}

/**
 * A JSON object with a single random change: a number nudged, a sign flipped, an entry dropped,
 * doubled or swapped, a key renamed, a digit of a text changed. Every field of the object is met as
 * often as any other, however much it holds.
 */
export function singleChange(value: Json): fc.Arbitrary<Json> {
	if (value === null || typeof value !== 'object') throw new Error('no object to change');
	const fields: Path[][] = Object.keys(value).map((key) =>
		pathsOf(valueAt(value, [key])).map((path) => [key, ...path])
	);
	const places = [[[]], ...fields, ...fields, ...fields];
	return fc
		.tuple(fc.constantFrom(...places), fc.nat(), fc.array(fc.nat(), { minLength: 6, maxLength: 6 }))
		.map(([paths, place, numbers]) => {
			const path = paths[place % paths.length] ?? [];
			let at = 0;
			const draw: Draw = (count) => (numbers[at++ % numbers.length] ?? 0) % count;
			return changedAt(value, path, (old) => slip(old, draw));
		});
}
