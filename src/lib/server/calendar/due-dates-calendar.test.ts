import fc from 'fast-check';
import ICAL from 'ical.js';
import { describe, expect, it } from 'vitest';
import { dueDatesCalendar, type DueTask } from './due-dates-calendar';

/**
 * Read back by ical.js, a parser that shares no code with the generator; lengths and line ends as
 * RFC 5545 section 3.1 sets them, REFRESH-INTERVAL and NAME as RFC 7986 sections 5.7 and 5.1 do.
 */
const task = (over: Partial<DueTask> = {}): DueTask => ({
	id: '01938000-0000-7000-8000-000000000001',
	number: 4,
	version: 3,
	kind: 'recompute',
	state: 'assigned',
	dueOn: '2026-12-14',
	updatedAt: new Date('2026-12-01T10:20:30.456Z'),
	assignee: 'Wren Aldous',
	groupSlug: 'quarry',
	groupName: 'Quarry group',
	claimNumber: 12,
	quantity: 'Quantum maximum',
	subject: 'A0 B0 + A0 B1 + A1 B0 - A1 B1',
	inequality: 'CHSH',
	relation: '<=',
	printed: '2.8284',
	paper: 'Arden & Voss 2004',
	locator: 'eq. (7)',
	...over
});

const calendarOf = (tasks: readonly DueTask[], name = 'Tasks of Quarry group') =>
	dueDatesCalendar({
		name,
		address: 'https://stones.example/g/quarry/tasks',
		origin: 'https://stones.example',
		tasks
	});

function read(text: string) {
	const calendar = new ICAL.Component(ICAL.parse(text) as unknown[]);
	const events = calendar.getAllSubcomponents('vevent').map((each) => new ICAL.Event(each));
	return { calendar, events };
}

describe('a calendar of due dates', () => {
	it('holds a whole day for each task', () => {
		const { calendar, events } = read(calendarOf([task()]));
		expect(calendar.getFirstPropertyValue('version')).toBe('2.0');
		expect(String(calendar.getFirstPropertyValue('refresh-interval'))).toBe('PT1H');
		expect(calendar.getFirstPropertyValue('name')).toBe('Tasks of Quarry group');
		expect(events).toHaveLength(1);
		const [event] = events;
		expect(event?.startDate.isDate).toBe(true);
		expect(event?.startDate.toString()).toBe('2026-12-14');
		expect(event?.uid).toBe(task().id);
		expect(event?.sequence).toBe(3);
		expect(event?.summary).toBe('Task 4 due: Recompute elsewhere');
		expect(event?.description).toBe(
			'Claim 12: Quantum maximum of CHSH ≤ 2.8284\nArden & Voss 2004, eq. (7)\n' +
				'Assigned, Wren Aldous\nQuarry group'
		);
		const value = (name: string) => String(event?.component.getFirstPropertyValue(name));
		expect(value('url')).toBe('https://stones.example/g/quarry/tasks/4');
		expect(value('last-modified')).toBe('2026-12-01T10:20:30Z');
		expect(value('dtstamp')).toBe('2026-12-01T10:20:30Z');
		expect(value('transp')).toBe('TRANSPARENT');
	});

	it('says the same day whatever the time zone of the server', () => {
		const before = process.env.TZ;
		try {
			for (const zone of ['Pacific/Auckland', 'America/Los_Angeles', 'UTC']) {
				process.env.TZ = zone;
				expect(calendarOf([task()])).toContain('\r\nDTSTART;VALUE=DATE:20261214\r\n');
			}
		} finally {
			if (before === undefined) delete process.env.TZ;
			else process.env.TZ = before;
		}
	});

	it('gives the same bytes for the same tasks, and leaves out those without a date', () => {
		expect(calendarOf([task()])).toBe(calendarOf([task(), task({ dueOn: null })]));
		expect(read(calendarOf([])).events).toEqual([]);
	});

	it('names a task that is open to all by its state, and an inequality by its expression', () => {
		const [event] = read(
			calendarOf([task({ assignee: null, state: 'open', inequality: null, relation: '=' })])
		).events;
		expect(event?.description).toContain('A0 B0 + A0 B1 + A1 B0 - A1 B1 = 2.8284');
		expect(event?.description).toContain('\nOpen to all\n');
		const [long] = read(
			calendarOf([task({ inequality: null, subject: 'A0 B0 + '.repeat(500) })])
		).events;
		expect(long?.description.length).toBeLessThan(400);
	});

	it('keeps commas, semicolons, backslashes, line ends and letters of any script', () => {
		const odd = 'Zürich; “Ångström, Ørsted” \\n, 漢字 🪨, ';
		const { calendar, events } = read(
			calendarOf([task({ paper: odd.repeat(8), groupName: 'a\r\nEND:VEVENT\u0007' })], odd)
		);
		expect(events).toHaveLength(1);
		expect(events[0]?.description).toContain(`${odd.repeat(8)}, eq. (7)`);
		expect(events[0]?.description.split('\n').at(-1)).toBe('a END:VEVENT');
		// The parser knows neither as text (RFC 7986), so they are taken out of it as they stand.
		const escaped = 'Zürich\\; “Ångström\\, Ørsted” \\\\n\\, 漢字 🪨\\,';
		expect(calendar.getFirstPropertyValue('name')).toBe(escaped);
		expect(calendar.getFirstPropertyValue('x-wr-calname')).toBe(escaped);
	});

	it('is folded at 75 octets, ends lines with CRLF and holds one event a task, whatever is typed', () => {
		const texts = fc.string({ unit: 'binary', maxLength: 150 });
		fc.assert(
			fc.property(texts, texts, texts, (name, paper, locator) => {
				const text = calendarOf([task({ paper, locator, quantity: name })], `N ${name}`);
				expect(text.endsWith('END:VCALENDAR\r\n')).toBe(true);
				for (const line of text.split('\r\n')) {
					expect(Buffer.byteLength(line)).toBeLessThanOrEqual(75);
					expect(line).not.toMatch(/[\r\n]/);
				}
				const { events } = read(text);
				expect(events).toHaveLength(1);
				const plain = (typed: string) => typed.replace(/[\p{Cc}\u2028\u2029]+/gu, ' ').trim();
				expect(events[0]?.description.split('\n')[1]).toBe(plain(`${paper}, ${locator}`));
			})
		);
	});
});
