/**
 * The vertices of a no-signalling polytope, listed anew for the check: every inequality in turn cuts
 * the cone over what is left (double description), in BigInt.
 */
import { ratio, type Rational } from '../exact/rational';
import { tableKey } from '../scenario/exact-table';
import { collinsGisinForm, eventsKey, makeFunctional } from '../scenario/functional';
import { COEFFICIENT_ONE } from '../exact/coefficient';
import type { Event, Scenario } from '../scenario/scenario';

/** Rays kept at any time. */
const RAY_LIMIT = 6_000;

/** P(a|x) as constant + form . y in Collins-Gisin coordinates. */
export interface ProbabilityForm {
	readonly key: string;
	/** By coordinate, the constant under 0. */
	readonly form: ReadonlyMap<number, bigint>;
}

interface Ray {
	readonly point: readonly bigint[];
	/** Numbers of the inequalities met with equality. */
	readonly tight: ReadonlySet<number>;
}

/** Every P(a|x) of the scenario, and the number of coordinates, the constant counted. */
function probabilityForms(scenario: Scenario): {
	readonly forms: readonly ProbabilityForm[];
	readonly size: number;
} {
	const tuples = scenario.outputs.reduce<Event[][]>(
		(found, counts, p) =>
			found.flatMap((events) =>
				counts.flatMap((count, x) =>
					Array.from({ length: count }, (_, a): Event[] => [...events, [p, x, a]])
				)
			),
		[[]]
	);
	const places = new Map([['', 0]]);
	const forms = tuples.map((events) => {
		const { terms } = collinsGisinForm(
			makeFunctional(scenario, [{ coefficient: COEFFICIENT_ONE, events }])
		);
		const form = new Map<number, bigint>();
		for (const { coefficient, events: moment } of terms) {
			const key = eventsKey(moment);
			const place = places.get(key) ?? places.size;
			places.set(key, place);
			form.set(place, BigInt(Math.sign(coefficient.value)));
		}
		const key = tableKey(
			events.map(([, , a]) => a),
			events.map(([, x]) => x)
		);
		return { key, form };
	});
	return { forms, size: places.size };
}

/**
 * All vertices as tables of probabilities, zeros left out.
 * @returns null beyond the limit of rays
 */
export function verticesOfGroup(scenario: Scenario): Map<string, Rational>[] | null {
	const { forms, size } = probabilityForms(scenario);
	// Coordinates are probabilities: the cone starts as the non-negative orthant.
	let rays: Ray[] = Array.from({ length: size }, (_, i) => ({
		point: Array.from({ length: size }, (_unused, j) => (i === j ? 1n : 0n)),
		tight: new Set(Array.from({ length: size }, (_unused, j) => j).filter((j) => j !== i))
	}));
	for (const [k, { form }] of [...forms.entries()].reverse()) {
		rays = cut(rays, form, size + k, size);
		if (rays.length > RAY_LIMIT) return null;
	}
	return rays.map(({ point }) => {
		const total = point[0] ?? 1n;
		const table = new Map<string, Rational>();
		for (const { key, form } of forms) {
			const value = evaluate(form, point);
			if (value !== 0n) table.set(key, ratio(value, total));
		}
		return table;
	});
}

function cut(rays: readonly Ray[], form: ProbabilityForm['form'], row: number, size: number) {
	const sided = rays.map((ray) => ({ ray, value: evaluate(form, ray.point) }));
	const kept = sided.flatMap(({ ray, value }) => {
		if (value < 0n) return [];
		return value > 0n ? [ray] : [{ point: ray.point, tight: new Set([...ray.tight, row]) }];
	});
	const outside = sided.filter(({ value }) => value < 0n);
	for (const { ray, value } of sided) {
		if (value <= 0n) continue;
		for (const other of outside) {
			const common = [...ray.tight].filter((i) => other.ray.tight.has(i));
			if (common.length < size - 2) continue;
			const contains = ({ tight }: Ray) => common.every((i) => tight.has(i));
			// On one edge when no third ray lies in the smallest face around both.
			if (rays.some((third) => third !== ray && third !== other.ray && contains(third))) continue;
			const point = ray.point.map((x, i) => value * (other.ray.point[i] ?? 0n) - other.value * x);
			const divisor = point.reduce(commonDivisor, 0n);
			kept.push({ point: point.map((x) => x / divisor), tight: new Set([...common, row]) });
		}
	}
	return kept;
}

function evaluate(form: ProbabilityForm['form'], point: readonly bigint[]): bigint {
	let sum = 0n;
	for (const [place, value] of form) sum += value * (point[place] ?? 0n);
	return sum;
}

function commonDivisor(a: bigint, b: bigint): bigint {
	while (b !== 0n) [a, b] = [b, a % b];
	return a < 0n ? -a : a;
}
