import { positionAfter, stepsFromStart } from './grid';
import { MAX_MOVE_CENTS } from './trace';
import type { RawTrial, TraceEvent, TraceKind, TrialSpec } from './types';

/** Moves closer together than this are one: a held key makes about twelve entries a second. */
const MERGE_MS = 80;
/** Beyond this many entries moves are merged whatever their distance, so that a block stays sendable. */
const MANY_EVENTS = 1200;
/** A pause longer than this counts as this long: a page left open overnight is not practice. */
export const LONGEST_PAUSE_MS = 60_000;

/**
 * Where the moving string is and what was done, while a trial runs. Times are any clock's
 * milliseconds that do not run backwards.
 */
export class TraceRecorder {
	private readonly trace: TraceEvent[] = [];
	private steps = 0;
	private elapsedMs = 0;

	constructor(
		private readonly spec: TrialSpec,
		private lastMs: number
	) {}

	/** Cents of the moving string above its target. */
	get cents(): number {
		return positionAfter(this.spec.startCents, this.steps);
	}

	/** True once the strings were struck together. */
	get wasStruck(): boolean {
		return this.trace.some(([, kind]) => kind === 'strike');
	}

	/**
	 * Moves the string by so many grid steps.
	 * @returns false when it stood at the end of its range and stayed there
	 */
	move(steps: number, nowMs: number): boolean {
		const before = this.cents;
		this.steps = stepsFromStart(
			this.spec.startCents,
			positionAfter(this.spec.startCents, this.steps + steps)
		);
		if (this.cents === before) return false;
		this.tick(nowMs);
		this.recordMove();
		return true;
	}

	/** Records what was played; the string stays where it is. */
	note(kind: Exclude<TraceKind, 'move'>, nowMs: number): void {
		this.tick(nowMs);
		this.trace.push([this.time(), kind, this.cents]);
	}

	/** The trial as it is handed in. */
	commit(nowMs: number): RawTrial {
		this.tick(nowMs);
		return {
			index: this.spec.index,
			startCents: this.spec.startCents,
			trace: [...this.trace],
			committedCents: this.cents,
			committedAtMs: this.time()
		};
	}

	private recordMove(): void {
		const event: TraceEvent = [this.time(), 'move', this.cents];
		const last = this.trace.at(-1);
		if (last?.[1] === 'move' && this.mayMerge(last)) this.trace[this.trace.length - 1] = event;
		else this.trace.push(event);
	}

	private mayMerge(last: TraceEvent): boolean {
		const beforeIt = this.trace.at(-2)?.[2] ?? this.spec.startCents;
		if (Math.abs(this.cents - beforeIt) > MAX_MOVE_CENTS) return false;
		return this.time() - last[0] < MERGE_MS || this.trace.length >= MANY_EVENTS;
	}

	private tick(nowMs: number): void {
		this.elapsedMs += Math.min(LONGEST_PAUSE_MS, Math.max(0, nowMs - this.lastMs));
		this.lastMs = nowMs;
	}

	private time(): number {
		return Math.round(this.elapsedMs);
	}
}
