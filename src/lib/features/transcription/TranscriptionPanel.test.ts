import { render } from '@testing-library/svelte';
import { describe, expect, it } from 'vitest';
import type { TranscriptionCheckView } from '../../schemas/task-views';
import type { ClaimView } from '../../schemas/views';
import { makeLedgerRow, makeVerdict } from '../../../../tests/factories/views';
import TranscriptionPanel from './TranscriptionPanel.svelte';

type PanelClaim = Pick<
	ClaimView,
	| 'version'
	| 'state'
	| 'visibility'
	| 'verdict'
	| 'quantityLabel'
	| 'relation'
	| 'printed'
	| 'printedHtml'
	| 'locator'
	| 'subject'
	| 'reference'
>;

const check = (over: Partial<TranscriptionCheckView> = {}): TranscriptionCheckView => ({
	by: { id: 'p1', name: 'Wren Adeyo' },
	at: '2026-11-03T10:00:00.000Z',
	claimVersion: 2,
	valueMatches: true,
	locatorMatches: true,
	inequalityMatches: true,
	note: '',
	current: true,
	...over
});

const { quantityLabel, relation, printed, printedHtml, subject, visibility } = makeLedgerRow();
const claim: PanelClaim = {
	version: 2,
	state: 'active',
	visibility,
	verdict: makeVerdict({ status: 'discrepancy' }),
	quantityLabel,
	relation,
	printed,
	printedHtml,
	locator: 'eq. (7)',
	subject,
	reference: {
		id: 'r1',
		title: 'A note on two settings',
		short: 'Arden & Voss 2004',
		source: '',
		formatted: '',
		year: 2004,
		doi: '10.5555/jip.1',
		arxiv: null,
		bibtex: '',
		cslJson: '[]'
	}
};

const panel = (over: {
	claim?: Partial<PanelClaim>;
	confirmed?: boolean;
	checks?: TranscriptionCheckView[];
	ownClaim?: boolean;
	mayConfirm?: boolean;
	typed?: Record<'valueMatches' | 'locatorMatches' | 'inequalityMatches' | 'note', string>;
}) => {
	const { claim: changed, typed, ...transcription } = over;
	return render(TranscriptionPanel, {
		claim: { ...claim, ...changed },
		transcription: {
			confirmed: false,
			checks: [],
			ownClaim: false,
			mayConfirm: true,
			...transcription
		},
		typed: typed ?? null,
		issues: typed ? [{ field: 'note', message: 'Say what is wrong' }] : []
	});
};

describe('TranscriptionPanel', () => {
	it('asks three questions, each beside what was entered', () => {
		const { getByRole, container } = panel({});
		for (const question of ['value printed so', 'stand there', 'this inequality']) {
			expect(getByRole('group', { name: new RegExp(question) })).toBeTruthy();
		}
		expect(container.textContent).toContain('eq. (7)');
		expect(container.querySelector('details')?.open).toBe(true);
	});

	it('says who confirmed it, and folds the form', () => {
		const { container } = panel({ confirmed: true, checks: [check()] });
		expect(container.textContent).toContain('As in the paper: value, locator and inequality.');
		expect(container.textContent).toContain('Wren Adeyo');
		expect(container.querySelector('details')?.open).toBe(false);
	});

	it('offers nothing to who entered it, and says why', () => {
		const { container } = panel({ ownClaim: true, mayConfirm: false });
		expect(container.querySelector('form')).toBeNull();
		expect(container.textContent).toContain('somebody else compares it');
	});

	it('says that a published discrepancy is hidden until it is confirmed', () => {
		const { container } = panel({ claim: { visibility: 'public' } });
		expect(container.textContent).toContain('hidden from everyone outside the group');
	});

	it('tells an earlier version’s comparison from a present one', () => {
		const { container } = panel({ checks: [check({ claimVersion: 1, current: false })] });
		expect(container.textContent).toContain('edited since it was compared');
		expect(container.textContent).toContain('counts no more');
	});

	it('keeps what was answered, open, with the error at its field', () => {
		const typed = { valueMatches: 'no', locatorMatches: 'yes', inequalityMatches: '', note: '' };
		const { container, getByLabelText } = panel({ checks: [check()], confirmed: true, typed });
		expect(container.querySelector('details')?.open).toBe(true);
		expect(container.querySelector('[name=valueMatches][value=no]:checked')).toBeTruthy();
		expect(getByLabelText('What is wrong').getAttribute('aria-invalid')).toBe('true');
	});
});
