import { collinsGisinForm, eventsKey, type Functional } from '../scenario/functional';
import type { Event } from '../scenario/scenario';

/** An operator of one party; `id` numbers the different ones from 0. */
export interface Letter {
	readonly id: number;
	readonly party: number;
	readonly input: number;
	readonly output: number;
}

/** scalar * 1 + sum over branches of E_letter (x) (its node), on the parties after the prefix. */
export interface BellNode {
	scalar: number;
	readonly branches: { readonly letter: Letter; readonly node: BellNode }[];
}

/** What the other parties do in some terms, and where those terms enter one party's operators. */
export interface Context {
	readonly letters: readonly Letter[];
	readonly uses: readonly {
		readonly input: number;
		readonly output: number;
		readonly weight: number;
	}[];
}

/**
 * A functional arranged for alternating maximisation, in Collins-Gisin coordinates (the last
 * output of each input never occurs): as an operator on the state, and as seen by each party.
 */
export interface SeeSawFunctional {
	readonly outputs: readonly (readonly number[])[];
	readonly root: BellNode;
	readonly letters: readonly Letter[];
	/** `contexts[party]`. */
	readonly contexts: readonly (readonly Context[])[];
	/** Largest |coefficient|, constant left out; 1 for a constant functional. */
	readonly scale: number;
}

export function arrangeForSeeSaw(functional: Functional): SeeSawFunctional {
	const { outputs } = functional.scenario;
	const form = collinsGisinForm(functional);
	const letters = new Map<string, Letter>();
	const letterOf = (event: Event): Letter => {
		const key = event.join('.');
		const known = letters.get(key);
		if (known) return known;
		const [party, input, output] = event;
		const letter = { id: letters.size, party, input, output };
		letters.set(key, letter);
		return letter;
	};
	const root: BellNode = { scalar: 0, branches: [] };
	const contexts = outputs.map(() => new Map<string, { letters: Letter[]; uses: Use[] }>());
	let scale = 0;
	for (const { coefficient, events } of form.terms) {
		const weight = coefficient.value;
		if (events.length > 0) scale = Math.max(scale, Math.abs(weight));
		let node = root;
		for (const event of events) node = descend(node, letterOf(event));
		node.scalar += weight;
		for (const event of events) {
			const [party, input, output] = event;
			const others = events.filter((other) => other !== event);
			const key = eventsKey(others);
			const known = contexts[party]?.get(key) ?? { letters: others.map(letterOf), uses: [] };
			known.uses.push({ input, output, weight });
			contexts[party]?.set(key, known);
		}
	}
	return {
		outputs,
		root,
		letters: [...letters.values()],
		contexts: contexts.map((map) => [...map.values()]),
		scale: scale || 1
	};
}

type Use = Context['uses'][number];

function descend(node: BellNode, letter: Letter): BellNode {
	const known = node.branches.find((branch) => branch.letter === letter);
	if (known) return known.node;
	const child: BellNode = { scalar: 0, branches: [] };
	node.branches.push({ letter, node: child });
	return child;
}
