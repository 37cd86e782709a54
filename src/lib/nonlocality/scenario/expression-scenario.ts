import { NotationError, NotationLimitError } from '../exact/notation-error';
import { EXPRESSION_LIMITS } from './expression-tokens';
import { PARTY_LETTERS, type Node, type WrittenInput } from './expression-tree';

/** A written input with the number of outputs its use calls for: exactly 2, or at least some. */
interface Use extends WrittenInput {
	readonly exactlyTwo: boolean;
	readonly outputs: number;
}

/**
 * The index base of an expression and its scenario: the one given, or the smallest that contains
 * every index. @throws NotationError at the index that does not fit.
 */
export function readScenario(
	root: Node,
	wanted: 0 | 1 | 'read',
	given: readonly (readonly number[])[] | undefined
): { outputs: readonly (readonly number[])[]; base: 0 | 1 | null } {
	const uses: Use[] = [];
	const unnamed: { count: number; position: number; name: string }[] = [];
	visit(root, uses, unnamed);
	const parties = given?.length ?? Math.max(0, ...uses.map((use) => use.party + 1));
	for (const { count, position, name } of unnamed) {
		if (count >= parties) continue;
		const letters = PARTY_LETTERS.slice(0, count);
		throw new NotationError(
			`${name} with ${count === 1 ? 'one index' : `${count} indices`} among ${parties} parties does not say whose they are`,
			position,
			name === 'P'
				? `Write P_${letters}(...).`
				: `Write <${[...letters].map((l) => `${l}0`).join(' ')}>.`
		);
	}
	const zero = uses.some((use) => use.index === 0);
	const base = uses.length === 0 ? null : wanted === 'read' ? (zero ? 0 : 1) : wanted;
	for (const use of uses) checkUse(use, base ?? 0, given);
	return { outputs: given ?? smallestScenario(uses, parties, base ?? 0), base };
}

function visit(
	node: Node,
	uses: Use[],
	unnamed: { count: number; position: number; name: string }[]
): void {
	switch (node.kind) {
		case 'number':
			return;
		case 'sum':
		case 'product':
			for (const item of node.items) visit(item.node, uses, unnamed);
			return;
		case 'power':
			visit(node.base, uses, unnamed);
			return visit(node.exponent, uses, unnamed);
		case 'function':
			return visit(node.argument, uses, unnamed);
		case 'correlator':
			for (const input of node.inputs) uses.push({ ...input, exactlyTwo: true, outputs: 2 });
			if (node.everyone)
				unnamed.push({ count: node.inputs.length, position: node.position, name: 'E' });
			return;
		case 'probability':
			for (const { output, ...input } of node.events)
				uses.push({ ...input, exactlyTwo: false, outputs: output + 1 });
			if (node.everyone)
				unnamed.push({ count: node.events.length, position: node.position, name: 'P' });
	}
}

const letterOf = (party: number) => PARTY_LETTERS[party] ?? '?';

function checkUse(use: Use, base: 0 | 1, given: readonly (readonly number[])[] | undefined): void {
	const { party, index, position } = use;
	const name = letterOf(party);
	const input = index - base;
	if (input < 0)
		throw new NotationError(
			`${name}0 does not exist when indices start at 1`,
			position,
			'If they start at 0, choose that.'
		);
	if (!given) {
		if (input >= EXPRESSION_LIMITS.inputs)
			throw new NotationLimitError(
				`a party has at most ${EXPRESSION_LIMITS.inputs} inputs, this asks for input ${index} of ${name}`,
				position
			);
		if (use.outputs > EXPRESSION_LIMITS.outputs)
			throw new NotationLimitError(
				`an input has at most ${EXPRESSION_LIMITS.outputs} outputs, this asks for output ${use.outputs - 1}`,
				position
			);
		return;
	}
	const inputs = given[party];
	if (!inputs)
		throw new NotationError(
			`there is no party ${name}: the scenario has ${given.length}`,
			position,
			'Change the outputs given, or leave them out.'
		);
	const count = inputs[input];
	if (count === undefined)
		throw new NotationError(
			`${name} has no input ${index} when indices start at ${base} and it has ${inputs.length} inputs`,
			position,
			base === 0 && index === inputs.length ? 'If indices start at 1, choose that.' : null
		);
	if (use.exactlyTwo && count !== 2) throw notTwo(name, index, count, position);
	if (use.outputs > count)
		throw new NotationError(
			`input ${index} of ${name} has no output ${use.outputs - 1}: it has ${count}, counted from 0`,
			position
		);
}

function notTwo(name: string, index: number, count: number, position: number): NotationError {
	return new NotationError(
		`the observable ${name}${index} needs an input with two outputs, not ${count}`,
		position,
		`Write it with probabilities, as P_${name}(0|${index}).`
	);
}

function smallestScenario(uses: readonly Use[], parties: number, base: 0 | 1): number[][] {
	if (parties === 0)
		throw new NotationError(
			'there is no observable and no probability here',
			0,
			'Write for example A0 B0 + A0 B1 + A1 B0 - A1 B1.'
		);
	const outputs = Array.from({ length: parties }, (_, party) => {
		const inputs = uses.filter((use) => use.party === party).map((use) => use.index - base + 1);
		return Array.from({ length: Math.max(1, ...inputs) }, () => 2);
	});
	for (const use of uses) {
		const row = outputs[use.party] ?? [];
		const input = use.index - base;
		row[input] = Math.max(row[input] ?? 2, use.outputs);
	}
	for (const use of uses) {
		const count = outputs[use.party]?.[use.index - base] ?? 2;
		if (use.exactlyTwo && count !== 2)
			throw notTwo(letterOf(use.party), use.index, count, use.position);
	}
	return outputs;
}
