import { expect, it } from 'vitest';
import { networkOf } from './client-address';

it.each([
	// The documentation's prefixes: RFC 3849 and RFC 5737.
	['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
	['2001:DB8:1:2::', '2001:db8:1:2::/64'],
	['2001:db8:1:2:ffff:ffff:ffff:ffff', '2001:db8:1:2::/64'],
	['2001:db8:1:3::1', '2001:db8:1:3::/64'],
	['2001:db8::1', '2001:db8:0:0::/64'],
	['::1', '0:0:0:0::/64'],
	['fe80::1%eth0', 'fe80:0:0:0::/64'],
	['192.0.2.7', '192.0.2.7'],
	['::ffff:192.0.2.7', '192.0.2.7'],
	['0:0:0:0:0:FFFF:c000:207', '192.0.2.7'],
	['unknown', 'unknown']
])('takes %s as %s', (address, network) => {
	expect(networkOf(address)).toBe(network);
});
