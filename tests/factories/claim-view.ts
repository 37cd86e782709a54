import { claimInput } from '../../src/lib/schemas/claim-input';
import type { ClaimView } from '../../src/lib/schemas/views';
import { makeStations, makeVerdict } from './views';

/** The page of an invented claim on CHSH, to be changed where a test needs it. */
export function makeClaimView(over: Partial<ClaimView> = {}): ClaimView {
	return {
		id: 'c1',
		number: 12,
		version: 1,
		groupSlug: 'a',
		groupName: 'Reading group',
		subject: { inequalityId: 'i1', text: 'CHSH', html: null, latex: null, scenario: '2 in, 2 out' },
		map: null,
		quantity: 'quantum',
		quantityLabel: 'Quantum maximum',
		relation: '=',
		printed: '2.8284',
		printedHtml: null,
		method: '',
		locator: 'eq. 7',
		note: '',
		state: 'active',
		visibility: 'group',
		supersededBy: null,
		verdict: makeVerdict(),
		confirmed: false,
		notices: [],
		stations: makeStations(),
		progress: null,
		recomputationId: null,
		recomputations: [],
		reference: {
			id: 'r1',
			title: 'A note on two settings',
			short: 'Arden & Voss 2004',
			source: 'M. Arden, T. Voss, J. Invented Phys. (2004)',
			formatted: '',
			year: 2004,
			doi: '10.5555/jip.12.345',
			arxiv: null,
			bibtex: '',
			cslJson: ''
		},
		history: [],
		input: claimInput.parse({}),
		caution: false,
		enteredBy: 'Olin Owner',
		enteredAt: '2026-11-30T09:00:00.000Z',
		own: false,
		...over
	};
}
