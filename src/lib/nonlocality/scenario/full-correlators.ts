import type { Functional } from './functional';
import { functionalOfZeroSumForm, zeroSumForm } from './zero-sum-form';

/**
 * Behaviours that signal within a group of parties have no marginals for a part of the group, so a
 * functional means something on them only when it looks at all parties at once. Writings that agree
 * on no-signalling behaviours may differ there; the zero-sum form is the one that is taken.
 *
 * Says which marginal the zero-sum form of a functional contains; null when there is none.
 */
export function partialMeasurement(functional: Functional): string | null {
	const parties = functional.scenario.outputs.length;
	const block = zeroSumForm(functional).blocks.find((b) => b.measurements.length < parties);
	if (!block) return null;
	const where = block.measurements.map(([p, x]) => `input ${x} of party ${p}`).join(' and ');
	return (
		`the functional contains a marginal (${where}, without the others), which is not defined when ` +
		'parties of a group signal to each other; take the model "no-signalling", or a functional of ' +
		'correlators of all parties'
	);
}

/** The writing in which every term but the constant measures all parties; see above. */
export function fullCorrelatorForm(functional: Functional): Functional {
	return functionalOfZeroSumForm(zeroSumForm(functional));
}
