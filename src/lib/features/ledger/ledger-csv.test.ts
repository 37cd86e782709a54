import { describe, expect, it } from 'vitest';
import { makeLedgerRow, makeVerdict } from '../../../../tests/factories/views';
import { ledgerCsv } from './ledger-csv';

const line = (text: string, at = 1) => text.split('\r\n')[at] ?? '';

describe('ledgerCsv', () => {
	it('gives a heading and a line a row', () => {
		const text = ledgerCsv([makeLedgerRow()]);
		expect(line(text, 0)).toMatch(/^number,status,quantity,inequality,/);
		expect(line(text)).toContain('1,agreement,Quantum maximum,CHSH,"2 in, 2 out",=,2.8284,');
		expect(text.endsWith('\r\n')).toBe(true);
	});

	// Cells that spreadsheets take for formulas, after OWASP's page on CSV injection.
	it.each(['=1+1', '+cmd', '@SUM(A1)', '-2+3', '\tx'])('keeps %j text', (printed) => {
		expect(line(ledgerCsv([makeLedgerRow({ printed })]))).toContain(`,'${printed},`);
	});

	it('leaves negative numbers as they are', () => {
		expect(line(ledgerCsv([makeLedgerRow({ printed: '-0.25' })]))).toContain(',-0.25,');
	});

	it('doubles quotes and keeps line breaks inside a cell', () => {
		const verdict = makeVerdict({ reason: 'says "x",\nthen y' });
		expect(ledgerCsv([makeLedgerRow({ verdict })])).toContain('"says ""x"",\nthen y"');
	});
});
