import { GRID_CENTS, RANGE_CENTS } from './types';

/** Whole grid steps in a cent. */
const STEPS_PER_CENT = Math.round(1 / GRID_CENTS);

/** Cents rounded to hundredths: the one form in which positions are kept and compared. */
export function hundredths(cents: number): number {
	// Adding 0 turns -0 into 0, which JSON cannot keep apart.
	return Math.round(cents * 100) / 100 + 0;
}

/** The position `steps` grid steps from the start, held within the string's range. */
export function positionAfter(startCents: number, steps: number): number {
	const limited = Math.min(
		stepsWithin(RANGE_CENTS - startCents),
		Math.max(-stepsWithin(RANGE_CENTS + startCents), steps)
	);
	return hundredths(startCents + limited / STEPS_PER_CENT);
}

/** Grid steps from the start to a position; not whole when the position is off the grid. */
export function stepsFromStart(startCents: number, cents: number): number {
	return (Math.round(cents * 100) - Math.round(startCents * 100)) / (100 / STEPS_PER_CENT);
}

/** A move in cents as whole grid steps. */
export function stepsOfMove(cents: number): number {
	return Math.round(cents * STEPS_PER_CENT);
}

/** True when a position can be reached from the start: on its grid, within the range, in hundredths. */
export function isReachable(startCents: number, cents: number): boolean {
	return (
		Number.isFinite(cents) &&
		Math.abs(cents) <= RANGE_CENTS &&
		hundredths(cents) === cents &&
		Number.isInteger(stepsFromStart(startCents, cents))
	);
}

function stepsWithin(cents: number): number {
	return Math.floor(hundredths(cents) * STEPS_PER_CENT + 1e-9);
}
