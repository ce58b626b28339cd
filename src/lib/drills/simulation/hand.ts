import { integer, type Random } from '../../acoustics/random';
import { positionAfter, stepsFromStart, stepsOfMove } from '../grid';
import {
	COARSE_STEP_CENTS,
	GRID_CENTS,
	PAGE_STEP_CENTS,
	type RawTrial,
	type TraceEvent,
	type TraceKind,
	type TrialSpec
} from '../types';

/** A hand at the keys of one trial: presses, strikes and the time they take make the trace. */
export class Hand {
	private timeMs = 0;
	private steps = 0;
	private readonly trace: TraceEvent[] = [];

	constructor(
		private readonly spec: TrialSpec,
		private readonly random: Random
	) {
		this.timeMs = integer(random, 400, 1500);
	}

	/** Where the moving string is, cents above its target. */
	get cents(): number {
		return positionAfter(this.spec.startCents, this.steps);
	}

	/** Strikes and listens for a while. */
	strike(listenMs: number): void {
		this.note('strike');
		this.wait(listenMs);
	}

	/** Help, check note, target beat: something is played, the string stays. */
	play(kind: TraceKind, lastsMs: number): void {
		this.note(kind);
		this.wait(lastsMs);
	}

	/** Moves by about so many cents, in the presses a hand would choose. */
	move(cents: number): void {
		let left = stepsOfMove(cents);
		const sizes = [PAGE_STEP_CENTS, COARSE_STEP_CENTS, GRID_CENTS].map(stepsOfMove);
		for (const size of sizes) {
			while (Math.abs(left) >= size) {
				const press = Math.sign(left) * size;
				left -= press;
				this.press(press);
			}
		}
	}

	moveTo(cents: number): void {
		this.move(cents - this.cents);
	}

	commit(): RawTrial {
		this.wait(integer(this.random, 300, 1200));
		return {
			index: this.spec.index,
			startCents: this.spec.startCents,
			trace: this.trace,
			committedCents: this.cents,
			committedAtMs: this.timeMs
		};
	}

	private press(steps: number): void {
		this.wait(integer(this.random, 90, 190));
		// The string stops at the end of its range; from there it can be moved back at once.
		const reached = positionAfter(this.spec.startCents, this.steps + steps);
		this.steps = stepsFromStart(this.spec.startCents, reached);
		this.note('move');
	}

	private note(kind: TraceKind): void {
		this.trace.push([this.timeMs, kind, this.cents]);
	}

	private wait(ms: number): void {
		this.timeMs += Math.max(1, Math.round(ms));
	}
}
