/** JSON that people paste: read strictly, with the place of what is wrong with it. */

/** Lists and objects within one another; a result has at most 8. */
export const JSON_DEPTH = 32;

export class JsonTextError extends Error {
	constructor(
		message: string,
		/** Zero-based, in characters of the text. */
		readonly position: number,
		text: string
	) {
		const before = text.slice(0, position).split('\n');
		const column = (before.at(-1)?.length ?? 0) + 1;
		super(`${message} (line ${before.length}, column ${column})`);
		this.name = 'JsonTextError';
	}
}

// Of the control characters only those up to U+001F must be escaped.
const TOKEN =
	/[{}[\],:]|"(?:[^"\\\p{Cc}]+|[\u007f-\u009f]|\\(?:["\\/bfnrt]|u[0-9a-fA-F]{4}))*"|-?(?:0|[1-9]\d*)(?:\.\d+)?(?:[eE][+-]?\d+)?|true|false|null/uy;
const SPACE = /[ \t\n\r]*/y;

/**
 * The value of a JSON text (RFC 8259).
 * @throws JsonTextError
 */
export function parseJsonText(text: string): unknown {
	walk(text);
	return JSON.parse(text);
}

type Expected = 'value' | 'first value' | 'first name' | 'name' | 'colon' | 'comma' | 'end';

const WORDS: Readonly<Record<Expected, string>> = {
	value: 'a value',
	'first value': 'a value or ]',
	'first name': 'a name in double quotes or }',
	name: 'a name in double quotes',
	colon: 'a colon',
	comma: 'a comma or the end of the list or object',
	end: 'nothing more'
};

/** Follows the grammar with a stack of its own, so that no depth of a text exhausts ours. */
function walk(text: string): void {
	const open: ('[' | '{')[] = [];
	const names: Set<string>[] = [];
	let expected: Expected = 'value';
	let at = 0;
	const fail = (message: string): never => {
		throw new JsonTextError(message, at, text);
	};
	const closed = (): Expected => (open.length === 0 ? 'end' : 'comma');
	for (;;) {
		SPACE.lastIndex = at;
		SPACE.exec(text);
		at = SPACE.lastIndex;
		if (at >= text.length) {
			if (expected === 'end') return;
			fail(`The text ends where ${WORDS[expected]} should be`);
		}
		TOKEN.lastIndex = at;
		const token = TOKEN.exec(text)?.[0];
		const found = JSON.stringify(text.slice(at, at + 20));
		if (token === undefined) return fail(`${found} is no JSON: here should be ${WORDS[expected]}`);
		const refuse = () => fail(`Here should be ${WORDS[expected]}, not ${found}`);
		const isValue = expected === 'value' || expected === 'first value';
		const isName = expected === 'name' || expected === 'first name';
		if (token === '{' || token === '[') {
			if (!isValue) refuse();
			if (open.length >= JSON_DEPTH)
				fail(`More than ${JSON_DEPTH} lists or objects in one another`);
			open.push(token);
			names.push(new Set());
			expected = token === '{' ? 'first name' : 'first value';
		} else if (token === '}' || token === ']') {
			const own = open.at(-1) === (token === '}' ? '{' : '[');
			const may =
				expected === 'comma' || expected === (token === '}' ? 'first name' : 'first value');
			if (!own || !may) refuse();
			open.pop();
			names.pop();
			expected = closed();
		} else if (token === ',') {
			if (expected !== 'comma') refuse();
			expected = open.at(-1) === '{' ? 'name' : 'value';
		} else if (token === ':') {
			if (expected !== 'colon') refuse();
			expected = 'value';
		} else if (isName && token.startsWith('"')) {
			const known = names.at(-1);
			// Readers differ in which of two counts; a certificate must mean one thing.
			if (known?.has(token)) fail(`The name ${token.slice(0, 40)} occurs twice`);
			known?.add(token);
			expected = 'colon';
		} else {
			if (!isValue) refuse();
			expected = closed();
		}
		at = TOKEN.lastIndex;
	}
}
