import { overCommonDenominator } from '../exact/common-denominator';
import { ratio, type Rational } from '../exact/rational';
import type { HybridBipartition, HybridCertificate } from '../certificates/types';
import { SolverStop, type Control } from '../problem';
import { integerFunctional, type IntegerFunctional } from '../scenario/fixed-point';
import { collinsGisinForm, eventsKey, type Functional } from '../scenario/functional';
import { bipartitions, scenarioOfGroup, type Bipartition } from '../scenario/merged-parties';
import type { Event, Scenario } from '../scenario/scenario';
import type { HybridFinding } from './hybrid-maximum';
import type { IntegerObjective } from './no-signalling-certificate';
import { maximiseOverPolytope, recordOfRows } from './no-signalling-programme';
import { noSignallingRows, type NoSignallingRows } from './no-signalling-rows';
import { polytopeVertices } from './polytope-vertices';
import { twiceTheErrors } from './strategy-tensor';
import type { WorkClock } from './work-clock';

/** Linear programmes over all bipartitions: a millisecond or more each. */
const PROGRAMME_LIMIT = 20_000;

/**
 * No-signalling groups: the maximum is at a vertex of each group's polytope. The vertices of the
 * group with the smaller polytope are listed; for each of them the other group's best behaviour is a
 * linear programme, made exact.
 */
export async function noSignallingHybrid(
	functional: Functional,
	clock: WorkClock,
	control: Control
): Promise<HybridFinding> {
	const { scenario } = functional;
	const integers = integerFunctional(collinsGisinForm(functional));
	const unit = ratio(1n, integers.denominator);
	const splits = bipartitions(scenario.outputs.length).map((groups) =>
		splitOf(scenario, groups, clock)
	);
	const total = splits.reduce((sum, { vertices }) => sum + vertices.length, 0);
	if (total > PROGRAMME_LIMIT)
		throw new SolverStop(
			'limit',
			`${total} linear programmes would have to be solved, more than the limit of ${PROGRAMME_LIMIT}`
		);
	let done = 0;
	let below: Rational | null = null;
	let above: Rational | null = null;
	let best: Pick<HybridCertificate, 'groups' | 'behaviours'> = { groups: [], behaviours: [] };
	const proofs: HybridBipartition[] = [];
	for (const split of splits) {
		const branches: HybridBipartition['branches'][number][] = [];
		for (const vertex of split.vertices) {
			clock.check();
			control.report({
				stage: `no-signalling groups ${split.groups.join(' | ')}`,
				iteration: done,
				fraction: done++ / total,
				lower: null,
				upper: null
			});
			const { objective, denominator } = objectiveAt(integers, split, vertex);
			const { behaviour, multipliers } = await maximiseOverPolytope(
				split.other,
				objective,
				clock,
				control
			);
			const scale = unit.div(ratio(denominator));
			const [reached, bound] = [behaviour.value.mul(scale), multipliers.bound.mul(scale)];
			const table = recordOfRows(split.own, probabilitiesAt(split.own, vertex));
			branches.push({
				vertex: table,
				multipliers: recordOfRows(
					split.other,
					multipliers.multipliers.map((m) => m.mul(scale))
				)
			});
			if (above === null || bound.compare(above) > 0) above = bound;
			if (below !== null && reached.compare(below) <= 0) continue;
			below = reached;
			const reply = recordOfRows(split.other, behaviour.probabilities);
			const behaviours = split.listed === 0 ? [table, reply] : [reply, table];
			best = { groups: split.groups, behaviours };
		}
		proofs.push({ groups: split.groups, listed: split.listed, branches });
	}
	if (!below || !above) throw new SolverStop('failed', 'there is no bipartition');
	return {
		below,
		above,
		allowance: integers.allowance.add(twiceTheErrors(functional)),
		...best,
		bipartitions: proofs,
		method: {
			name: 'linear programme for each vertex of the smaller group',
			programmes: total
		}
	};
}

interface Split {
	readonly groups: Bipartition;
	/** The group whose vertices are listed. */
	readonly listed: 0 | 1;
	readonly own: NoSignallingRows;
	readonly other: NoSignallingRows;
	readonly vertices: readonly (readonly Rational[])[];
}

function splitOf(scenario: Scenario, groups: Bipartition, clock: WorkClock): Split {
	const [first, second] = groups.map((group) => noSignallingRows(scenarioOfGroup(scenario, group)));
	if (!first || !second) throw new SolverStop('failed', 'a bipartition has two groups');
	const listed = first.columns.length <= second.columns.length ? 0 : 1;
	const [own, other] = listed === 0 ? [first, second] : [second, first];
	const vertices = polytopeVertices(own, () => clock.check());
	return { groups, listed, own, other, vertices };
}

/** The functional at a vertex of the listed group, times `denominator`. */
function objectiveAt(
	{ terms }: IntegerFunctional,
	{ groups, listed, own, other }: Split,
	vertex: readonly Rational[]
): { objective: IntegerObjective; denominator: bigint } {
	const { integers, denominator } = overCommonDenominator(vertex);
	const costs = other.columns.map(() => 0n);
	let constant = 0n;
	for (const { coefficient, events } of terms) {
		const inGroup = (group: readonly number[]) =>
			events.flatMap(([p, x, a]): Event[] => {
				const place = group.indexOf(p);
				return place < 0 ? [] : [[place, x, a]];
			});
		const at = own.columnOf.get(eventsKey(inGroup(groups[listed])));
		const weight = coefficient * (at === undefined ? denominator : (integers[at] ?? 0n));
		const column = other.columnOf.get(eventsKey(inGroup(groups[1 - listed] ?? [])));
		if (column === undefined) constant += weight;
		else costs[column] = (costs[column] ?? 0n) + weight;
	}
	return { objective: { costs, constant }, denominator };
}

function probabilitiesAt(polytope: NoSignallingRows, vertex: readonly Rational[]): Rational[] {
	return polytope.rows.map(({ constant, entries }) =>
		entries.reduce(
			(sum, [column, value]) => sum.add((vertex[column] ?? ratio(0n)).mul(ratio(BigInt(value)))),
			ratio(BigInt(constant))
		)
	);
}
