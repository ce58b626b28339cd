/** Σ coefficient·x[index] = value, or ≥ value where it is a constraint. */
export interface Row {
	index: number[];
	coefficient: number[];
	value: number;
}

/** A constraint counts as met within this (cents, in the target solver). */
const SLACK = 1e-7;
const MOST_ROUNDS = 50;
const MOST_SWEEPS = 5000;

/** Value of a row's left side at `x`. */
function valueOf(row: Row, x: Float64Array): number {
	return row.index.reduce((sum, index, k) => sum + row.coefficient[k] * x[index], 0);
}

/** The constraints that have been violated so far, in the dual problem. */
class ActiveSet {
	readonly rows: Row[] = [];
	private readonly responses: Float64Array[] = [];
	private readonly gram: number[][] = [];
	private readonly gaps: number[] = [];
	private readonly forces: number[] = [];

	/** @param free the optimum without constraints */
	constructor(private readonly free: Float64Array) {}

	/** @param response A⁻¹·row: how the unknowns answer to a force on this row */
	add(row: Row, response: Float64Array): void {
		this.gram.forEach((line, k) => line.push(valueOf(this.rows[k], response)));
		this.rows.push(row);
		this.responses.push(response);
		this.gram.push(this.responses.map((earlier) => valueOf(row, earlier)));
		this.gaps.push(row.value - valueOf(row, this.free));
		this.forces.push(0);
	}

	/** Coordinate ascent on the forces, none below 0 (Hildreth 1957), until nothing moves. */
	ascend(): void {
		for (let sweep = 0; sweep < MOST_SWEEPS; sweep += 1) {
			let largest = 0;
			for (let k = 0; k < this.rows.length; k += 1) {
				const line = this.gram[k];
				let pull = this.gaps[k];
				for (let j = 0; j < line.length; j += 1) pull -= line[j] * this.forces[j];
				const change = Math.max(0, this.forces[k] + pull / line[k]) - this.forces[k];
				this.forces[k] += change;
				largest = Math.max(largest, Math.abs(change) * line[k]);
			}
			if (largest < SLACK / 10) return;
		}
	}

	/** The unknowns under the present forces. */
	solution(): Float64Array {
		const x = Float64Array.from(this.free);
		this.responses.forEach((response, k) => {
			if (this.forces[k] === 0) return;
			for (let i = 0; i < x.length; i += 1) x[i] += this.forces[k] * response[i];
		});
		return x;
	}
}

/**
 * Least-squares optimum under inequalities: dual coordinate ascent on the rows found violated so
 * far, repeated until no row is violated.
 * @param free optimum without constraints; returned itself when it violates none
 * @param respond A⁻¹·row for the problem's matrix A
 */
export function enforce(
	free: Float64Array,
	rows: readonly Row[],
	respond: (row: Row) => Float64Array
): Float64Array {
	const active = new ActiveSet(free);
	let x = free;
	for (let round = 0; round < MOST_ROUNDS; round += 1) {
		const violated = rows.filter((row) => row.value - valueOf(row, x) > SLACK);
		if (violated.length === 0) return x;
		for (const row of violated) if (!active.rows.includes(row)) active.add(row, respond(row));
		active.ascend();
		x = active.solution();
	}
	return x;
}
