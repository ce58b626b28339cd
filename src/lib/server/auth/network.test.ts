import { describe, expect, it } from 'vitest';
import { networkOf } from './network';

describe('what counts as one sender', () => {
	it.each([
		['192.0.2.7', '192.0.2.7'],
		['::ffff:192.0.2.7', '192.0.2.7'],
		['2001:db8:1:2:3:4:5:6', '2001:db8:1:2::/64'],
		['2001:DB8:1:2::9', '2001:db8:1:2::/64'],
		['2001:db8::1', '2001:db8:0:0::/64'],
		['2001:db8:0:0:1::', '2001:db8:0:0::/64'],
		['fe80::1%eth0', 'fe80:0:0:0::/64'],
		['::1', '0:0:0:0::/64']
	])('%s is %s', (address, network) => {
		expect(networkOf(address)).toBe(network);
	});

	it.each(['someone@studio.example', 'a1b2c3', ''])('leaves %j as it is', (text) => {
		expect(networkOf(text)).toBe(text);
	});
});
