import { STATUS_LABELS, type VerdictStatus } from '../../ledger/claim';

/** Sign, word and colour of each verdict; told apart by the first two alone. */
export const VERDICT_LOOKS: Readonly<
	Record<VerdictStatus, { readonly sign: string; readonly word: string; readonly tone: string }>
> = {
	agreement: { sign: '≈', word: STATUS_LABELS.agreement, tone: 'bg-agreement-soft text-agreement' },
	discrepancy: {
		sign: '≠',
		word: STATUS_LABELS.discrepancy,
		tone: 'bg-discrepancy-soft text-discrepancy'
	},
	open: { sign: '?', word: STATUS_LABELS.open, tone: 'bg-open-soft text-open' }
};
