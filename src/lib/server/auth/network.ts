import { isIPv6 } from 'node:net';

/** Groups of 16 bits that a provider hands out as one line's network (RFC 6177: a /64 at the least). */
const NETWORK_GROUPS = 4;

/**
 * What counts as one sender: an IPv4 address by itself, of an IPv6 address the first 64 bits, because
 * one machine may use all addresses of its network. Text that is no address is given back.
 */
export function networkOf(address: string): string {
	const mapped = /^::ffff:(\d+\.\d+\.\d+\.\d+)$/i.exec(address);
	if (mapped) return mapped[1];
	if (!isIPv6(address)) return address;
	// The URL parser writes every IPv6 address in its one shortest form.
	const short = new URL(`http://[${address.split('%')[0]}]`).hostname.slice(1, -1);
	const [head, tail = ''] = short.split('::');
	const groups = head.split(':').filter(Boolean);
	const last = tail.split(':').filter(Boolean);
	while (groups.length + last.length < 8) groups.push('0');
	return `${[...groups, ...last].slice(0, NETWORK_GROUPS).join(':')}::/64`;
}
