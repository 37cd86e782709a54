import { isIPv6 } from 'node:net';

/** A network of this many leading groups of sixteen bits is one household or office. */
const NETWORK_GROUPS = 4;

interface Caller {
	getClientAddress(): string;
}

/**
 * What limits of an address count by. IPv6 gives each subnet a /64 (RFC 4291 section 2.5.1), and
 * whoever has one may take any of its addresses, so that the network counts as one; an IPv4
 * address counts alone, also where it is written as IPv6 (RFC 4291 section 2.5.5.2).
 */
export function clientAddress(event: Caller): string {
	return networkOf(event.getClientAddress());
}

export function networkOf(address: string): string {
	// A zone names the server's own interface (RFC 4007), nothing of the caller.
	const plain = address.replace(/%.*$/, '');
	if (!isIPv6(plain)) return address;
	const groups = groupsOf(plain);
	const v4 = groups.slice(0, 5).every((group) => group === 0) && groups[5] === 0xffff;
	if (v4) return dotted(groups.slice(6));
	return `${groups
		.slice(0, NETWORK_GROUPS)
		.map((group) => group.toString(16))
		.join(':')}::/64`;
}

/** The eight groups of an address that is one. */
function groupsOf(address: string): number[] {
	const parse = (text: string) =>
		text === ''
			? []
			: text.split(':').flatMap((part) => (part.includes('.') ? pair(part) : hex(part)));
	const [head = '', tail] = address.split('::');
	const before = parse(head);
	if (tail === undefined) return before;
	const after = parse(tail);
	return [...before, ...Array<number>(8 - before.length - after.length).fill(0), ...after];
}

const hex = (part: string) => [Number.parseInt(part, 16)];

function pair(part: string): number[] {
	const [a = 0, b = 0, c = 0, d = 0] = part.split('.').map(Number);
	return [a * 256 + b, c * 256 + d];
}

const dotted = (groups: readonly number[]) =>
	groups.flatMap((group) => [group >> 8, group & 255]).join('.');
