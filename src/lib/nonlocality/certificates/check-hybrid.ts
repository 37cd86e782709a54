/**
 * Check of a hybrid maximum. Lower side: g at the product of two behaviours, each of a group. Upper
 * side: Svetlichny's model by enumerating all joint strategies again while that is cheap; the
 * no-signalling model by the multipliers given for each vertex of one group, whose vertices are
 * listed anew here.
 */
import { exactCoefficient } from '../exact/coefficient';
import { ONE, ZERO, printRational, type Rational } from '../exact/rational';
import type { ProblemOf } from '../problem';
import {
	marginalOf,
	readTable,
	tableDefect,
	tableKey,
	type ExactTable
} from '../scenario/exact-table';
import { fullCorrelatorForm, partialMeasurement } from '../scenario/full-correlators';
import {
	collinsGisinForm,
	eventsKey,
	makeFunctional,
	type Functional,
	type Term
} from '../scenario/functional';
import {
	bipartitions,
	jointInputs,
	mergeParties,
	scenarioOfGroup
} from '../scenario/merged-parties';
import type { Event, Scenario } from '../scenario/scenario';
import { digitsOf } from '../scenario/zero-sum-form';
import { allowanceOf } from './check-deterministic-strategy';
import { enumerateAgain, exactOf } from './enumerate-again';
import { verticesOfGroup } from './group-vertices';
import { outcomeOfTwoSides } from './two-sides';
import type { CheckOutcome, HybridBipartition, HybridCertificate } from './types';

const refuse = (reason: string): CheckOutcome => ({ checked: false, reason });

/** Proves both sides (the upper of a large enumeration excepted) of the hybrid maximum of g. */
export function checkHybrid(
	problem: ProblemOf<'hybrid'>,
	g: Functional,
	certificate: HybridCertificate
): CheckOutcome {
	const signalling = problem.model === 'svetlichny';
	if (g.scenario.outputs.length < 3) return refuse('a hybrid model needs three parties or more');
	if (problem.constraints.length > 0) return refuse('a hybrid maximum knows no constraints');
	const partial = signalling ? partialMeasurement(g) : null;
	if (partial) return refuse(partial);
	const written = signalling ? fullCorrelatorForm(g) : collinsGisinForm(g);
	const allowance = allowanceOf(written);

	const below = valueOfProduct(written, certificate, signalling);
	if (typeof below === 'string') return refuse(`lower side: ${below}`);
	const above = signalling
		? enumerateBipartitions(written)
		: boundOfBipartitions(written, certificate.bipartitions);
	if (typeof above === 'string') return refuse(`upper side: ${above}`);
	return outcomeOfTwoSides(
		certificate.value,
		{ below, above, allowance, rational: allowance.n === 0n },
		methodOf(signalling, above !== null)
	);
}

function methodOf(signalling: boolean, bounded: boolean): string {
	if (!bounded)
		return 'value of the strategies recomputed; only the lower side is checked, the enumeration is too large to repeat here';
	return signalling
		? 'value of the strategies recomputed, all joint strategies of every bipartition enumerated again'
		: 'value of the behaviours recomputed; multipliers evaluated at every vertex, whose list was made anew';
}

/** g at the product of the two behaviours, or what is wrong with them. */
function valueOfProduct(
	{ scenario, terms }: Functional,
	{ groups, behaviours }: HybridCertificate,
	signalling: boolean
): Rational | string {
	if (!isBipartition(groups, scenario.outputs.length) || behaviours.length !== 2)
		return 'it is no bipartition of the parties with a behaviour for each group';
	const tables: ExactTable[] = [];
	for (const [k, group] of groups.entries()) {
		const table = readTable(scenarioOfGroup(scenario, group), behaviours[k] ?? {});
		if (typeof table === 'string') return `group ${k}: ${table}`;
		const defect = signalling ? distributionDefect(table) : tableDefect(table);
		if (defect) return `group ${k}: ${defect}`;
		tables.push(table);
	}
	return terms.reduce((sum, term) => {
		const product = tables.reduce(
			(p, table, k) => p.mul(marginalOf(table, eventsOfGroup(term, groups[k] ?? []))),
			exactOf(term)
		);
		return sum.add(product);
	}, ZERO);
}

function isBipartition(groups: readonly (readonly number[])[], parties: number): boolean {
	return bipartitions(parties).some((known) => JSON.stringify(known) === JSON.stringify(groups));
}

/** Events of a group's parties, numbered as in the group. */
function eventsOfGroup({ events }: Term, group: readonly number[]): Event[] {
	return events.flatMap(([p, x, a]): Event[] => {
		const place = group.indexOf(p);
		return place < 0 ? [] : [[place, x, a]];
	});
}

/** Any conditional distribution: it may signal. */
function distributionDefect({ scenario, probabilities }: ExactTable): string | null {
	for (const [key, value] of probabilities)
		if (value.compare(0) < 0) return `P(${key}) = ${printRational(value)} is negative`;
	const parties = scenario.outputs.map((_, p) => p);
	for (const { inputs, outputs } of jointInputs(scenario, parties)) {
		const count = outputs.reduce((product, n) => product * n, 1);
		let sum = ZERO;
		for (let index = 0; index < count; index++)
			sum = sum.add(probabilities.get(tableKey(digitsOf(index, outputs), inputs)) ?? ZERO);
		if (!sum.equals(1)) return `the probabilities at inputs ${inputs.join(',')} do not sum to 1`;
	}
	return null;
}

/** Null when one of the enumerations is too large here. */
function enumerateBipartitions(written: Functional): Rational | null {
	let most: Rational | null = null;
	for (const groups of bipartitions(written.scenario.outputs.length)) {
		const maximum = enumerateAgain(mergeParties(written, groups));
		if (!maximum) return null;
		if (most === null || maximum.compare(most) > 0) most = maximum;
	}
	return most;
}

function boundOfBipartitions(
	g: Functional,
	given: readonly HybridBipartition[]
): Rational | string {
	let most: Rational | null = null;
	const known: KnownVertices = new Map();
	for (const groups of bipartitions(g.scenario.outputs.length)) {
		const proof = given.find((p) => JSON.stringify(p.groups) === JSON.stringify(groups));
		if (!proof) return `the bipartition ${groups.join(' | ')} is missing`;
		const bound = boundOfBipartition(g, proof, known);
		if (typeof bound === 'string') return `bipartition ${groups.join(' | ')}: ${bound}`;
		if (most === null || bound.compare(most) > 0) most = bound;
	}
	return most ?? 'there is no bipartition';
}

/** Groups of the same outputs have the same vertices. */
type KnownVertices = Map<string, ReturnType<typeof verticesOfGroup>>;

function boundOfBipartition(
	g: Functional,
	proof: HybridBipartition,
	known: KnownVertices
): Rational | string {
	const [own, other] = [proof.groups[proof.listed], proof.groups[1 - proof.listed]];
	if (!own || !other) return 'it does not say whose vertices are listed';
	const scenario = scenarioOfGroup(g.scenario, own);
	const rest = scenarioOfGroup(g.scenario, other);
	const name = JSON.stringify(scenario.outputs);
	const vertices = known.get(name) ?? verticesOfGroup(scenario);
	known.set(name, vertices);
	if (!vertices) return 'its group has too many vertices to list here';
	const branches = new Map<string, Readonly<Record<string, string>>>();
	for (const { vertex, multipliers } of proof.branches) {
		const table = readTable(scenario, vertex);
		if (typeof table === 'string') return table;
		branches.set(keyOfTable(table.probabilities), multipliers);
	}
	const parts = partsOf(g, own, other);
	let most: Rational | null = null;
	for (const probabilities of vertices) {
		const multipliers = branches.get(keyOfTable(probabilities));
		if (!multipliers) return 'a vertex of the listed group is missing';
		const bound = boundAtVertex(parts, { scenario, probabilities }, rest, multipliers);
		if (typeof bound === 'string') return bound;
		if (most === null || bound.compare(most) > 0) most = bound;
	}
	return most ?? 'the listed group has no vertex';
}

function keyOfTable(probabilities: ReadonlyMap<string, Rational>): string {
	return [...probabilities]
		.filter(([, value]) => value.n !== 0n)
		.map(([key, value]) => `${key}=${printRational(value)}`)
		.sort()
		.join(' ');
}

/** The terms of g that share their events of one group. */
interface Part {
	readonly own: readonly Event[];
	readonly terms: { readonly value: Rational; readonly events: readonly Event[] }[];
}

function partsOf(g: Functional, own: readonly number[], other: readonly number[]): Part[] {
	const parts = new Map<string, Part>();
	for (const term of g.terms) {
		const events = eventsOfGroup(term, own);
		const part = parts.get(eventsKey(events)) ?? { own: events, terms: [] };
		parts.set(eventsKey(events), part);
		part.terms.push({ value: exactOf(term), events: eventsOfGroup(term, other) });
	}
	return [...parts.values()];
}

/** g at the vertex, plus multiplier times probability of the other group, bounded. */
function boundAtVertex(
	parts: readonly Part[],
	vertex: ExactTable,
	rest: Scenario,
	multipliers: Readonly<Record<string, string>>
): Rational | string {
	const terms = parts.flatMap((part): Term[] => {
		const weight = marginalOf(vertex, part.own);
		if (weight.n === 0n) return [];
		return part.terms.map(({ value, events }) => ({
			events,
			coefficient: exactCoefficient(value.mul(weight))
		}));
	});
	const table = readTable(rest, multipliers);
	if (typeof table === 'string') return `multipliers: ${table}`;
	for (const [key, value] of table.probabilities) {
		if (value.compare(0) < 0) return `the multiplier of ${key} is negative`;
		const [outputs, inputs] = key.split('|').map((list) => list.split(',').map(Number));
		const events = (outputs ?? []).map((a, p): Event => [p, inputs?.[p] ?? 0, a]);
		terms.push({ coefficient: exactCoefficient(value), events });
	}
	return collinsGisinForm(makeFunctional(rest, terms)).terms.reduce((bound, term) => {
		const value = term.coefficient.exact ?? ONE;
		return term.events.length === 0 || value.s > 0n ? bound.add(value) : bound;
	}, ZERO);
}
