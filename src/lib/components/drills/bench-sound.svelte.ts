import { intervalCheck } from '../../drills/checks';
import { intervalBeatHz } from '../../drills/interval-score';
import type { IntervalTrialSpec, TrialSpec } from '../../drills/types';
import type { ToneEngine } from '../../synthesis/types';
import {
	checkVoices,
	judgedPartialHz,
	movedString,
	trialVoices,
	VOICE_IDS,
	type Sounding
} from './voices';

export type LevelName = 'soft' | 'moderate' | 'firm';

/** Playback levels, linear. Moderate is where everybody starts; firm is below the engine's cap. */
export const LEVELS: Readonly<Record<LevelName, number>> = { soft: 0.25, moderate: 0.5, firm: 0.8 };

const HELP_SECONDS = 2.5;
const TARGET_SECONDS = 4;
const HALF_CHECK_MS = 3200;
const HEAR_MS = 4000;
const BETWEEN_MS = 500;

export interface SoundTools {
	readonly load: () => Promise<ToneEngine>;
	readonly wait: (ms: number) => Promise<void>;
}

/**
 * The sound of a bench: strings struck and moved, the help tone, the target beat, checks, and what is
 * heard again afterwards. The engine comes with the first gesture.
 */
export class BenchSound {
	state = $state<'off' | 'loading' | 'ready'>('off');
	/** Why there is no sound, in one sentence. */
	fault = $state<string | null>(null);
	level = $state<LevelName>('moderate');

	private engine: ToneEngine | null = null;
	private run = 0;

	constructor(private readonly tools: SoundTools) {}

	/** What the machine last said of its sound; null before it ever ran. */
	facts: { sampleRateHz: number; outputLatencySeconds: number | undefined } | null = null;

	/** Starts the sound; call it from a gesture. @returns false with `fault` set when it cannot. */
	async start(): Promise<boolean> {
		this.fault = null;
		if (!this.engine) this.state = 'loading';
		try {
			this.engine ??= await this.tools.load();
			await this.engine.resume();
			this.engine.setLevel(LEVELS[this.level]);
			this.state = 'ready';
			this.facts = {
				sampleRateHz: this.engine.sampleRateHz,
				outputLatencySeconds: this.engine.outputLatencySeconds || undefined
			};
			return true;
		} catch (cause) {
			this.fault = sentenceOf(cause);
			// An engine that does not run is let go, so that the next try begins afresh.
			void this.engine?.close().catch(() => undefined);
			this.engine = null;
			this.state = 'off';
			return false;
		}
	}

	setLevel(level: LevelName): void {
		this.level = level;
		this.engine?.setLevel(LEVELS[level]);
	}

	/** A blow on both strings or on one of them; the others are damped or muted. */
	strike(spec: TrialSpec, cents: number, sounding: Sounding): void {
		this.run += 1;
		const voices = trialVoices(spec, cents, sounding);
		this.dampAllBut(voices.map(({ id }) => id));
		for (const voice of voices) this.engine?.strike(voice);
	}

	/** The sounding string follows the lever. */
	follow(spec: TrialSpec, cents: number): void {
		const { voiceId, stringIndex, f1Hz } = movedString(spec, cents);
		this.engine?.retune(voiceId, stringIndex, f1Hz);
	}

	/** The pitch at which the partials meet, alone. */
	help(spec: TrialSpec): void {
		this.quiet();
		this.engine?.playPartial(judgedPartialHz(spec), HELP_SECONDS);
	}

	/** The beat to be set, at the pitch where it will be heard: two soft tones that far apart. */
	target(spec: IntervalTrialSpec): void {
		this.quiet();
		const hz = judgedPartialHz(spec);
		this.engine?.playPartial(hz, TARGET_SECONDS);
		this.engine?.playPartial(hz + Math.abs(intervalBeatHz(spec, 0)), TARGET_SECONDS);
	}

	/** The two intervals of the check, one after the other. */
	async check(spec: IntervalTrialSpec, cents: number): Promise<void> {
		this.quiet();
		const run = this.run;
		const { first, second } = intervalCheck(spec);
		for (const pair of [first, second]) {
			for (const voice of checkVoices(spec, cents, pair)) this.engine?.strike(voice);
			await this.tools.wait(HALF_CHECK_MS);
			if (run !== this.run) return;
			this.dampAllBut([]);
			await this.tools.wait(BETWEEN_MS / 2);
			if (run !== this.run) return;
		}
	}

	/** A trial as it sounds with the moving string at each of these places in turn. */
	async hear(spec: TrialSpec, places: readonly number[]): Promise<void> {
		if (!(await this.start())) return;
		this.quiet();
		const run = this.run;
		for (const cents of places) {
			for (const voice of trialVoices(spec, cents)) this.engine?.strike(voice);
			await this.tools.wait(HEAR_MS);
			if (run !== this.run) return;
			this.dampAllBut([]);
			await this.tools.wait(BETWEEN_MS);
			if (run !== this.run) return;
		}
	}

	/** Silence; whatever was to follow does not. */
	quiet(): void {
		this.run += 1;
		this.engine?.stopAll();
	}

	close(): void {
		this.quiet();
		void this.engine?.close().catch(() => undefined);
		this.engine = null;
		this.state = 'off';
	}

	private dampAllBut(kept: readonly string[]): void {
		for (const id of VOICE_IDS) if (!kept.includes(id)) this.engine?.damp(id);
	}
}

/** The sound of the page in a browser. */
export function browserSound(): BenchSound {
	return new BenchSound({
		load: async () => (await import('../../synthesis/engine')).createToneEngine(),
		wait: (ms) => new Promise((done) => setTimeout(done, ms))
	});
}

function sentenceOf(cause: unknown): string {
	const offline = typeof navigator !== 'undefined' && navigator.onLine === false;
	if (cause instanceof TypeError) {
		return offline
			? 'There is no network, and the sound has not been loaded yet.'
			: 'The sound could not be loaded. Try again in a moment.';
	}
	return cause instanceof Error && cause.message ? cause.message : 'The sound did not start.';
}
