/** The quantities a claim can be about: domain of the form, the ledger and the verdict. */
export interface QuantityInfo {
	readonly key: string;
	readonly label: string;
	/** Which parameters of the form belong to it. */
	readonly parameters: readonly ('sense' | 'level' | 'nonNegative' | 'dimension')[];
	/** `functional`: needs an inequality; `any`: may be about a subject given in words. */
	readonly subject: 'functional' | 'any';
	/** The problem's quantity that recomputes it; null while no solver serves it. */
	readonly solver: 'local' | 'no-signalling' | 'hybrid' | 'npa' | 'see-saw' | 'quantum' | null;
	/** Randomness, key-rate and efficiency figures carry the caution about devices. */
	readonly caution: boolean;
}

const maximum = (
	key: string,
	label: string,
	solver: QuantityInfo['solver'],
	parameters: QuantityInfo['parameters'] = ['sense']
): QuantityInfo => ({ key, label, parameters, subject: 'functional', solver, caution: false });

const withoutSolver = (key: string, label: string, caution = false): QuantityInfo => ({
	key,
	label,
	parameters: [],
	subject: 'any',
	solver: null,
	caution
});

export const QUANTITIES = [
	maximum('quantum', 'Quantum maximum', 'quantum'),
	maximum('local', 'Local maximum', 'local'),
	maximum('no-signalling', 'No-signalling maximum', 'no-signalling'),
	maximum('hybrid', 'Hybrid maximum (Svetlichny’s model)', 'hybrid'),
	maximum('hybrid-no-signalling', 'Hybrid maximum (no-signalling groups)', 'hybrid'),
	maximum('npa', 'NPA bound', 'npa', ['sense', 'level', 'nonNegative']),
	maximum('almost-quantum', 'Almost-quantum bound', 'npa'),
	maximum('macroscopic-locality', 'Macroscopic-locality bound', 'npa'),
	maximum('quantum-dimension', 'Quantum value in local dimension d', 'see-saw', [
		'sense',
		'dimension'
	]),
	maximum('maximally-entangled', 'Maximum with a maximally entangled state', 'see-saw', [
		'sense',
		'dimension'
	]),
	withoutSolver('visibility', 'Critical visibility'),
	withoutSolver('efficiency', 'Critical detection efficiency', true),
	withoutSolver('information-causality', 'Information-causality threshold'),
	withoutSolver('information-causality-test', 'Information-causality test of a box'),
	withoutSolver('guessing', 'Guessing probability', true),
	withoutSolver('min-entropy', 'Min-entropy', true),
	withoutSolver('key-rate', 'Key rate', true),
	withoutSolver('random-access-code', 'Random-access-code success'),
	withoutSolver('box-value', 'Value of a box or strategy'),
	withoutSolver('other', 'Other quantity')
] as const satisfies readonly QuantityInfo[];

export type QuantityKey = (typeof QUANTITIES)[number]['key'];
