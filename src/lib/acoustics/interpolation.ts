/** Nodes (x, y) by rising x. */
export type Nodes = readonly (readonly [number, number])[];

/** Value at `x` on straight lines between nodes, constant outside them. */
export function interpolate(nodes: Nodes, x: number): number {
	if (x <= nodes[0][0]) return nodes[0][1];
	for (let i = 1; i < nodes.length; i += 1) {
		const [x0, y0] = nodes[i - 1];
		const [x1, y1] = nodes[i];
		if (x <= x1) return y0 + ((y1 - y0) * (x - x0)) / (x1 - x0);
	}
	return nodes[nodes.length - 1][1];
}

/** As {@link interpolate}, but 0 outside the nodes. */
export function interpolateWithin(nodes: Nodes, x: number): number {
	return x < nodes[0][0] || x > nodes[nodes.length - 1][0] ? 0 : interpolate(nodes, x);
}
