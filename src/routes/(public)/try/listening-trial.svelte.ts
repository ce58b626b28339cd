import type { OddOneTrialSpec } from '$lib/drills/types';
import type { ToneEngine } from '$lib/synthesis/types';
import {
	REST_MS,
	TONE_MS,
	TONES,
	type ToneIndex,
	type TrialParts,
	type TrialReveal
} from './trial-parts';

/**
 * One listening trial: three tones in turn, one of which beats. Until the answer is given nothing is
 * known here of what sounded but which tone is sounding.
 */
export class ListeningTrial {
	phase = $state<'idle' | 'loading' | 'ready' | 'answered'>('idle');
	/** The tone that sounds now. */
	sounding = $state<ToneIndex | null>(null);
	/** Times all three were heard to the end. */
	heard = $state(0);
	answer = $state<ToneIndex | null>(null);
	reveal = $state.raw<TrialReveal | null>(null);
	fault = $state<string | null>(null);
	asked = $state(0);
	right = $state(0);

	private parts: TrialParts | null = null;
	private engine: ToneEngine | null = null;
	private spec: OddOneTrialSpec | null = null;
	private run = 0;

	constructor(
		private readonly load: () => Promise<TrialParts>,
		private readonly seed: () => number,
		private readonly wait: (ms: number) => Promise<void>
	) {}

	/** Plays the three tones; loads sound first. Call it from a gesture. */
	async listen(): Promise<void> {
		if (this.phase === 'loading') return;
		if (!(await this.prepare())) return;
		if (await this.play(TONES)) this.heard++;
	}

	/** Plays one tone again. */
	async again(tone: ToneIndex): Promise<void> {
		if (!(await this.prepare())) return;
		await this.play([tone]);
	}

	/** Commits an answer; from now on everything is shown. */
	choose(tone: ToneIndex): void {
		if (this.phase !== 'ready' || !this.spec || !this.parts) return;
		this.stop();
		this.answer = tone;
		this.reveal = this.parts.reveal(this.spec);
		this.asked++;
		if (tone === this.spec.answer) this.right++;
		this.phase = 'answered';
	}

	/** Another trial, with other tones. */
	async another(): Promise<void> {
		this.stop();
		this.spec = null;
		this.answer = null;
		this.reveal = null;
		this.heard = 0;
		this.phase = 'idle';
		await this.listen();
	}

	stop(): void {
		this.run++;
		this.sounding = null;
		this.engine?.stopAll();
	}

	close(): void {
		this.stop();
		void this.engine?.close();
		this.engine = null;
	}

	private async prepare(): Promise<boolean> {
		this.fault = null;
		const before = this.phase;
		if (!this.engine || !this.spec) this.phase = 'loading';
		try {
			this.parts ??= await this.load();
			this.engine ??= await this.parts.createEngine();
			await this.engine.resume();
			this.spec ??= this.parts.trial(this.seed());
			if (before !== 'answered') this.phase = 'ready';
			return true;
		} catch (cause) {
			this.phase = before;
			this.fault = sentenceOf(cause);
			// An engine that did not start is let go, so that the next try begins afresh.
			void this.engine?.close().catch(() => undefined);
			this.engine = null;
			return false;
		}
	}

	/** True when the tones sounded to their end. */
	private async play(tones: readonly ToneIndex[]): Promise<boolean> {
		this.stop();
		const run = this.run;
		const { engine, spec, parts } = this;
		if (!engine || !spec || !parts) return false;
		for (const tone of tones) {
			this.sounding = tone;
			parts.strike(engine, spec, tone);
			await this.wait(TONE_MS);
			if (run !== this.run) return false;
			parts.damp(engine, tone);
			this.sounding = null;
			await this.wait(REST_MS);
			if (run !== this.run) return false;
		}
		return true;
	}
}

function sentenceOf(cause: unknown): string {
	const offline = typeof navigator !== 'undefined' && navigator.onLine === false;
	if (offline)
		return 'There is no network, and the sound has not been loaded yet. Try again later.';
	if (cause instanceof TypeError) return 'The sound could not be loaded. Try again in a moment.';
	return cause instanceof Error && cause.message ? cause.message : 'The sound did not start.';
}
