import type { Verdict } from '../../src/lib/ledger/verdict';
import type { LedgerPage, LedgerRow, StationsView } from '../../src/lib/schemas/views';

/** Views filled with CHSH and its known values (2, 2 sqrt 2, 4), to be changed where a test needs it. */
export function makeVerdict(over: Partial<Verdict> = {}): Verdict {
	return {
		status: 'agreement',
		reasonCode: 'within',
		reason: 'The recomputed value lies inside the printed digits.',
		reading: {
			printed: '2.8284',
			low: '2.82835',
			high: '2.82845',
			exact: false,
			text: 'Read as 2.82835 to 2.82845'
		},
		enclosure: {
			lower: '2.828427124',
			upper: '2.828427125',
			exact: null,
			worth: 'guaranteed',
			lowerLabel: 'an explicit quantum strategy in dimension 2',
			upperLabel: 'NPA level 1'
		},
		diagnosis: [],
		...over
	};
}

export function makeStations(over: Partial<StationsView> = {}): StationsView {
	return {
		local: '2',
		quantumLower: '2.828427124',
		quantumUpper: '2.828427125',
		almostQuantum: '2.828427125',
		noSignalling: '4',
		complete: true,
		...over
	};
}

export function makeLedgerRow(over: Partial<LedgerRow> = {}): LedgerRow {
	return {
		id: '01900000-0000-7000-8000-000000000001',
		number: 1,
		subject: {
			inequalityId: '01900000-0000-7000-8000-00000000000a',
			text: 'CHSH',
			html: null,
			latex: null,
			scenario: '2 in, 2 out'
		},
		quantityLabel: 'Quantum maximum',
		relation: '=',
		printed: '2.8284',
		printedHtml: null,
		verdict: makeVerdict(),
		recomputedBy: 'NPA level 1, see-saw d=2',
		stations: makeStations(),
		disputed: false,
		task: null,
		wantsTask: false,
		progress: null,
		reference: {
			id: 'r1',
			short: 'Arden & Voss 2004',
			doi: '10.5555/jip.12.345',
			locator: 'eq. 7'
		},
		state: 'active',
		visibility: 'group',
		notices: [],
		...over
	};
}

export function makeLedgerPage(over: Partial<LedgerPage> = {}): LedgerPage {
	const rows = over.rows ?? [makeLedgerRow()];
	return {
		rows,
		total: rows.length,
		counts: { all: rows.length, agreement: rows.length, discrepancy: 0, open: 0 },
		page: 1,
		pageSize: 25,
		papers: 1,
		proposed: 0,
		scenarios: [{ value: '2 in, 2 out', count: rows.length }],
		quantities: [{ value: 'quantum', label: 'Quantum maximum', count: rows.length }],
		...over
	};
}
