import type { Compared } from '../../ledger/comparison';

/** The questions of a comparison with the paper, with a word for what each is about. */
export const QUESTIONS: readonly {
	readonly field: Compared;
	readonly label: string;
	readonly asks: string;
}[] = [
	{ field: 'valueMatches', label: 'Value', asks: 'Is the value printed so in the paper?' },
	{ field: 'locatorMatches', label: 'Where', asks: 'Does it stand there?' },
	{
		field: 'inequalityMatches',
		label: 'Inequality',
		asks: 'Is it about this inequality and quantity?'
	}
];
