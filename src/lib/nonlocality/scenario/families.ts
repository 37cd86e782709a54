import { parseCoefficient } from '../exact/expression';
import type { Coefficient } from '../exact/coefficient';
import { NotationError, errorWithin, NotationLimitError } from '../exact/notation-error';
import { FAMILIES, type FamilyInfo, type FamilyName } from './family-list';
import * as forms from './family-forms';
import type { Functional } from './functional';

export { FAMILIES, type FamilyInfo, type FamilyName } from './family-list';

/** A family's name with its parameter, as in the problem format: `{ name: 'cglmp', d: 3 }`. */
export interface FamilySpec {
	readonly name: string;
	readonly alpha?: number | string;
	readonly n?: number | string;
	readonly d?: number | string;
	readonly matrix?: readonly (readonly (number | string)[])[];
}

/** Largest matrix of an XOR game. */
const XOR_GAME_LIMIT = 20;

/** @throws NotationError when there is no family of that name. */
export function familyInfo(name: string): FamilyInfo {
	const info = FAMILIES.find((family) => family.name === name);
	if (info) return info;
	const names = FAMILIES.map((family) => family.name).join(', ');
	throw new NotationError(
		`there is no family named ${JSON.stringify(name.slice(0, 40))}`,
		null,
		`The families are ${names}.`
	);
}

/**
 * The functional of a family member.
 * @throws NotationError naming the parameter; NotationLimitError past its maximum.
 * @example familyFunctional({ name: 'cglmp', d: 3 })
 */
export function familyFunctional(spec: FamilySpec): Functional {
	const { name, parameter } = familyInfo(spec.name);
	refuseOtherParameters(spec, parameter?.key ?? null);
	const builders: Record<FamilyName, () => Functional> = {
		chsh: forms.chsh,
		'tilted-chsh': () => forms.tiltedChsh(numberParameter(spec)),
		chained: () => forms.chained(integerParameter(spec)),
		i3322: forms.i3322,
		cglmp: () => forms.cglmp(integerParameter(spec)),
		elegant: forms.elegant,
		mermin: () => forms.mermin(integerParameter(spec)),
		svetlichny: () => forms.svetlichny(integerParameter(spec)),
		gyni: () => forms.gyni(integerParameter(spec)),
		'xor-game': () => forms.correlatorForm(matrixParameter(spec)),
		'magic-square': forms.magicSquare
	};
	return builders[name]();
}

/** `CHSH`, `CGLMP d=3`, `Chained n=4`, `XOR game 3x3`. @throws as familyFunctional. */
export function familyTitle(spec: FamilySpec): string {
	const { title, parameter } = familyInfo(spec.name);
	if (!parameter) return title;
	if (parameter.kind === 'matrix') {
		const matrix = matrixParameter(spec);
		return `${title} ${matrix.length}\u00d7${matrix[0]?.length ?? 0}`;
	}
	const value = parameter.kind === 'integer' ? String(integerParameter(spec)) : printedNumber(spec);
	return `${title} ${parameter.key === 'alpha' ? '\u03b1' : parameter.key}=${value}`;
}

/** The family's formula in LaTeX, its parameter put in where that keeps it short. */
export function familyLatex(spec: FamilySpec): string {
	const { latex, parameter } = familyInfo(spec.name);
	if (parameter?.kind === 'integer') return latex(String(integerParameter(spec)));
	return latex(parameter?.kind === 'number' ? printedNumber(spec) : '');
}

/** As it was written: `0.5` stays `0.5`. */
const printedNumber = (spec: FamilySpec): string => {
	numberParameter(spec);
	return String(spec.alpha).trim();
};

function refuseOtherParameters(spec: FamilySpec, key: string | null): void {
	for (const other of Object.keys(spec)) {
		if (other === 'name' || other === key) continue;
		const takes = key === null ? 'no parameter' : `only the parameter ${key}`;
		throw new NotationError(`${spec.name} takes ${takes}, not ${other.slice(0, 40)}`);
	}
}

function integerParameter(spec: FamilySpec): number {
	const { parameter, name } = familyInfo(spec.name);
	if (!parameter || parameter.kind !== 'integer')
		throw new NotationError(`${name} has no such parameter`);
	const { key, minimum, maximum } = parameter;
	const given = key === 'd' ? spec.d : spec.n;
	const text = String(given ?? '').trim();
	const value = /^\d{1,6}$/.test(text) ? Number(text) : NaN;
	const wanted = `${key} must be an integer from ${minimum} to ${maximum} for ${name}`;
	if (value > maximum) throw new NotationLimitError(`${wanted}, not ${text}`);
	if (!(value >= minimum))
		throw new NotationError(text === '' ? wanted : `${wanted}, not ${text.slice(0, 40)}`);
	return value;
}

function numberParameter(spec: FamilySpec): Coefficient {
	const { parameter, name } = familyInfo(spec.name);
	if (!parameter || parameter.kind !== 'number')
		throw new NotationError(`${name} has no such parameter`);
	const { key, minimum, maximum } = parameter;
	const wanted = `${key} must be a number from ${minimum} to ${maximum} for ${name}`;
	if (spec.alpha === undefined || String(spec.alpha).trim() === '') throw new NotationError(wanted);
	const value = parseCoefficient(String(spec.alpha));
	if (value.value < minimum || value.value > maximum)
		throw new NotationError(`${wanted}, not ${value.text}`);
	return value;
}

function matrixParameter(spec: FamilySpec): Coefficient[][] {
	const rows = spec.matrix;
	const width = rows?.[0]?.length ?? 0;
	if (!rows || width === 0) throw new NotationError('the matrix of the XOR game is missing');
	if (rows.length > XOR_GAME_LIMIT || width > XOR_GAME_LIMIT)
		throw new NotationLimitError(
			`the matrix of an XOR game has at most ${XOR_GAME_LIMIT} rows and columns`
		);
	return rows.map((row, x) => {
		if (row.length !== width)
			throw new NotationError(
				`row ${x + 1} of the matrix has ${row.length} entries, the first has ${width}`
			);
		return row.map((entry, y) => {
			try {
				return parseCoefficient(String(entry));
			} catch (error) {
				throw errorWithin(`row ${x + 1}, column ${y + 1} of the matrix`, error);
			}
		});
	});
}
