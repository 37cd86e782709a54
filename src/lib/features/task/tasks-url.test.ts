import { expect, it } from 'vitest';
import { openedIn } from './tasks-url';

it.each([
	['', []],
	['opened=10,11,12', [10, 11, 12]],
	['opened=10,x,-3,0,1e3,10', [10]]
])('%j says that %j were opened', (search, numbers) => {
	expect([...openedIn(new URLSearchParams(search))]).toEqual(numbers);
});
