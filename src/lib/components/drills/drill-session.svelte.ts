import { attemptOf, isoTime } from '../../drills/attempt';
import { DEFAULT_OPTIONS, generateBlock, isKnownEngineVersion } from '../../drills/generate';
import { TraceRecorder } from '../../drills/recorder';
import { scoreBlock, scoreTrial } from '../../drills/score';
import type {
	AttemptSubmission,
	BlockOptions,
	BlockResult,
	BlockSpec,
	DeviceFacts,
	RawTrial,
	ScoredDrillId,
	TraceKind,
	TrialResult,
	TrialSpec
} from '../../drills/types';
import type { BlockStore } from '../../offline/block-store';
import type { BlockInProgress } from '../../offline/database';

export interface SessionTools {
	readonly userId: string;
	readonly store: BlockStore;
	/** Keeps a finished attempt and sets about sending it. */
	readonly handIn: (submission: AttemptSubmission) => Promise<void>;
	readonly device: () => DeviceFacts;
	/** Milliseconds since 1970. */
	readonly now: () => number;
	readonly wait: (ms: number) => Promise<void>;
	readonly newId: () => string;
	/** Whole number, 0 to 2^32 - 1. */
	readonly newSeed: () => number;
}

/** Truth comes about half a second after the answer, drawing included: later teaches less. */
export const FEEDBACK_MS = 400;

export type SessionPhase = 'intro' | 'trial' | 'committed' | 'reveal' | 'summary';

/**
 * One block from the first trial to the summary. Each trial is kept as soon as it is committed, so
 * that a reload goes on with the next; a finished block is handed in once, always in the same words.
 */
export class DrillSession {
	phase = $state<SessionPhase>('intro');
	block = $state.raw<BlockSpec | null>(null);
	raws = $state.raw<readonly RawTrial[]>([]);
	/** A block begun earlier. */
	unfinished = $state.raw<BlockInProgress | null>(null);
	/** Whether the strings of this trial were struck together yet: before that there is no answer. */
	struck = $state(false);
	submission = $state.raw<AttemptSubmission | null>(null);
	private recorder: TraceRecorder | null = null;
	private progress: BlockInProgress | null = null;

	constructor(
		readonly drill: ScoredDrillId,
		private readonly tools: SessionTools
	) {}

	/** The trial under way, or the one just answered. */
	get index(): number {
		return this.phase === 'trial' ? this.raws.length : Math.max(0, this.raws.length - 1);
	}

	get spec(): TrialSpec | null {
		return this.block?.trials[this.index] ?? null;
	}

	get lastRaw(): RawTrial | null {
		return this.raws.at(-1) ?? null;
	}

	get lastResult(): TrialResult | null {
		const { block, lastRaw, raws } = this;
		if (!block || !lastRaw) return null;
		return scoreTrial(block.trials[raws.length - 1], lastRaw, block.engineVersion);
	}

	get result(): BlockResult | null {
		return this.block ? scoreBlock(this.block, this.raws) : null;
	}

	get isLast(): boolean {
		return this.block !== null && this.raws.length >= this.block.trials.length;
	}

	/** Looks for a block begun earlier; one that was finished but not handed in is handed in now. */
	async restore(): Promise<void> {
		const kept = await this.tools.store.load(this.tools.userId, this.drill);
		if (!kept || !isKnownEngineVersion(kept.block.engineVersion)) return;
		if (kept.submission) await this.finish(kept);
		else if (kept.trials.length > 0) this.unfinished = kept;
	}

	/** Begins a new block. */
	begin(options: BlockOptions = DEFAULT_OPTIONS[this.drill]): void {
		this.unfinished = null;
		this.take({
			userId: this.tools.userId,
			drill: this.drill,
			attemptId: this.tools.newId(),
			block: generateBlock(this.drill, this.tools.newSeed(), options),
			trials: [],
			startedAt: isoTime(this.tools.now()),
			submission: null
		});
		this.startTrial();
	}

	/** Goes on with the block begun earlier. */
	goOn(): void {
		if (!this.unfinished) return;
		this.take(this.unfinished);
		this.unfinished = null;
		this.startTrial();
	}

	/** Where the moving string is. For the ear only: nothing on the screen may follow it. */
	get cents(): number {
		return this.recorder?.cents ?? 0;
	}

	/** Moves the string by grid steps; false when it stayed at the end of its range. */
	move(steps: number): boolean {
		if (this.phase !== 'trial') return false;
		return this.recorder?.move(steps, this.tools.now()) ?? false;
	}

	/** Records what was played. */
	note(kind: Exclude<TraceKind, 'move'>): void {
		if (this.phase !== 'trial') return;
		this.recorder?.note(kind, this.tools.now());
		if (kind === 'strike') this.struck = true;
	}

	/** Hands in the string as it stands; the reveal follows. */
	async commit(): Promise<void> {
		const { progress, recorder } = this;
		if (this.phase !== 'trial' || !recorder || !progress || !this.struck) return;
		this.raws = [...this.raws, recorder.commit(this.tools.now())];
		this.phase = 'committed';
		this.progress = { ...progress, trials: this.raws };
		if (this.isLast)
			this.progress = { ...this.progress, submission: this.submissionOf(this.progress) };
		await Promise.all([this.tools.store.save(this.progress), this.tools.wait(FEEDBACK_MS)]);
		this.phase = 'reveal';
		if (this.progress.submission) void this.handIn(this.progress);
	}

	/** From the reveal to the next trial, or to the summary after the last. */
	next(): void {
		if (this.phase !== 'reveal') return;
		if (this.isLast) this.phase = 'summary';
		else this.startTrial();
	}

	/** Back to the beginning, for another block. */
	again(): void {
		this.block = null;
		this.raws = [];
		this.submission = null;
		this.progress = null;
		this.phase = 'intro';
	}

	private take(progress: BlockInProgress): void {
		this.progress = progress;
		this.block = progress.block;
		this.raws = progress.trials;
		this.submission = null;
	}

	private startTrial(): void {
		this.phase = 'trial';
		this.struck = false;
		const spec = this.spec;
		this.recorder = spec ? new TraceRecorder(spec, this.tools.now()) : null;
	}

	private async finish(kept: BlockInProgress): Promise<void> {
		this.take(kept);
		this.phase = 'summary';
		await this.handIn(kept);
	}

	private async handIn(progress: BlockInProgress): Promise<void> {
		if (!progress.submission) return;
		this.submission = progress.submission;
		await this.tools.handIn(progress.submission);
		await this.tools.store.clear(progress.userId, progress.drill);
	}

	private submissionOf(progress: BlockInProgress): AttemptSubmission {
		const { attemptId, block, trials, startedAt } = progress;
		const device = this.tools.device();
		return attemptOf({ id: attemptId, block, trials, device, startedAt, nowMs: this.tools.now() });
	}
}
