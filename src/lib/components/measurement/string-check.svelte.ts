import { noteName } from '../../acoustics/units';
import type { PianoId } from '../../drills/catalogue';
import type { Analysis, AnalysisClient } from '../../measurement/client';
import { AnalysisFailedError } from '../../measurement/client-error';
import {
	AudioRefusedError,
	MAX_FILE_BYTES,
	refuseTooLarge
} from '../../measurement/formats/audio-refused';
import type { Microphone, MicrophoneListener } from '../../measurement/microphone';
import { MicrophoneError, type MicrophoneFaultText } from '../../measurement/microphone-error';
import type { MicrophoneFacts } from '../../measurement/microphone-facts';
import { StrikeRecorder, type StrikeClip } from '../../measurement/strike-recorder';
import type { MeasureKind } from '../../measurement/types';
import type { Asked } from './sentences';

/** What the page needs from the browser; tests put their own in. */
export interface StringCheckTools {
	openMicrophone(listener: MicrophoneListener): Promise<Microphone>;
	client(): Promise<AnalysisClient>;
}

/** A measured strike with all that is needed to show it. */
export interface Finding {
	asked: Asked;
	pianoId: PianoId;
	source: 'microphone' | 'file';
	analysis: Analysis;
	microphone: MicrophoneFacts | null;
	/** strikes that were superseded by a newer one */
	restarts: number;
}

export type Stage =
	| { name: 'choosing' }
	| { name: 'opening' }
	| { name: 'listening'; heard: 'quiet-first' | 'waiting' | 'ringing'; holes: number }
	| { name: 'measuring'; what: 'strike' | 'file' }
	| { name: 'found'; finding: Finding }
	| { name: 'fault'; text: MicrophoneFaultText }
	| { name: 'processed'; facts: MicrophoneFacts }
	| { name: 'no-strike'; floorDb: number };

const NO_STRIKE_SECONDS = 60;
/** Strikes that may be lost to a busy computer before the page says that it is no use. */
const MOST_HOLES = 4;

/** The string check's course: choose, listen, measure, show. Sound stays in this object's memory. */
export class StringCheck {
	kind = $state<MeasureKind>('interval');
	lowMidi = $state(57);
	semitones = $state(5);
	seconds = $state(4);
	pianoId = $state<PianoId>('medium-grand');
	stage = $state.raw<Stage>({ name: 'choosing' });
	/** why a file was refused, beside the place where it was given */
	fileError = $state<string | null>(null);

	private microphone: Microphone | null = null;
	/** what was heard last, for another go with other notes; dropped with the page */
	private lastClip: { clip: StrikeClip; facts: MicrophoneFacts } | null = null;
	private run = 0;

	constructor(private readonly tools: StringCheckTools) {}

	get highMidi(): number | null {
		return this.kind === 'interval' ? this.lowMidi + this.semitones : null;
	}

	get asked(): Asked {
		const { kind, lowMidi, highMidi, seconds } = this;
		return { kind, lowMidi, highMidi, seconds };
	}

	get noteNames(): string[] {
		const { lowMidi, highMidi } = this;
		return highMidi === null ? [noteName(lowMidi)] : [noteName(lowMidi), noteName(highMidi)];
	}

	/** Opens the microphone and waits for a strike. Call it from a press. */
	async listen(): Promise<void> {
		const run = this.begin({ name: 'opening' });
		let recorder: StrikeRecorder | null = null;
		const early: Float32Array[] = [];
		try {
			const opened = await this.tools.openMicrophone({
				onBlock: (block) => {
					if (run !== this.run) return;
					if (recorder) this.hear(recorder, block);
					else early.push(block.slice());
				},
				onFault: (error) => {
					if (run === this.run) this.fail(error);
				}
			});
			if (run !== this.run) return opened.close();
			if (opened.facts.processed) {
				opened.close();
				this.stage = { name: 'processed', facts: opened.facts };
				return;
			}
			this.microphone = opened;
			recorder = new StrikeRecorder(opened.facts.sampleRateHz, this.seconds);
			this.stage = { name: 'listening', heard: 'quiet-first', holes: 0 };
			for (const block of early) this.hear(recorder, block);
		} catch (error) {
			if (run === this.run) this.fail(error);
		}
	}

	/** Measures a file; refused ones leave the page as it was, with the reason. */
	async takeFile(file: File): Promise<void> {
		this.fileError = null;
		if (file.size > MAX_FILE_BYTES) {
			this.fileError = refuseTooLarge(file.size).message;
			return;
		}
		const run = this.begin({ name: 'measuring', what: 'file' });
		const asked = this.asked;
		try {
			const bytes = new Uint8Array(await file.arrayBuffer());
			const client = await this.tools.client();
			const analysis = await client.analyseFile(bytes, this.options(asked));
			if (run !== this.run) return;
			this.show({ asked, source: 'file', analysis, microphone: null, restarts: 0 });
		} catch (error) {
			if (run !== this.run) return;
			this.fileError = sentenceOf(error);
			this.stage = { name: 'choosing' };
		}
	}

	/** Back to the choice; whatever runs is stopped. */
	stop(): void {
		this.begin({ name: 'choosing' });
	}

	/** True when the last strike is still in memory and can be measured as other notes. */
	get canMeasureAgain(): boolean {
		return this.lastClip !== null;
	}

	/** Measures the strike that is still in memory again, as what is chosen now. */
	async measureAgain(): Promise<void> {
		if (this.lastClip) await this.measureClip(this.begin({ name: 'measuring', what: 'strike' }));
	}

	/** Lets the microphone and the sound in memory go. */
	close(): void {
		this.begin({ name: 'choosing' });
		this.lastClip = null;
	}

	private begin(stage: Stage): number {
		this.microphone?.close();
		this.microphone = null;
		this.fileError = null;
		this.stage = stage;
		return ++this.run;
	}

	private hear(recorder: StrikeRecorder, block: Float32Array): void {
		if (!this.microphone || this.stage.name !== 'listening') return;
		const state = recorder.add(block);
		const { facts } = this.microphone;
		if (state === 'done') {
			const clip = recorder.clip();
			const run = this.begin({ name: 'measuring', what: 'strike' });
			if (!clip) return;
			this.lastClip = { clip, facts };
			void this.measureClip(run);
		} else if (recorder.holes > MOST_HOLES) {
			this.fail(new MicrophoneError('gap'));
		} else if (state === 'waiting' && recorder.secondsHeard > NO_STRIKE_SECONDS) {
			this.begin({ name: 'no-strike', floorDb: recorder.floorDb });
		} else if (state !== this.stage.heard) {
			this.stage = { name: 'listening', heard: state, holes: recorder.holes };
		}
	}

	private async measureClip(run: number): Promise<void> {
		if (!this.lastClip) return;
		const { clip, facts } = this.lastClip;
		const asked = this.asked;
		try {
			const client = await this.tools.client();
			const analysis = await client.analyseClip(clip, this.options(asked));
			if (run !== this.run) return;
			const { restarts } = clip;
			this.show({ asked, source: 'microphone', analysis, microphone: facts, restarts });
		} catch (error) {
			if (run === this.run) this.fail(error);
		}
	}

	private options({ kind, lowMidi, highMidi, seconds }: Asked) {
		const notes = highMidi === null ? [lowMidi] : [lowMidi, highMidi];
		return { kind, notes, seconds };
	}

	private show(found: Omit<Finding, 'pianoId'>): void {
		this.stage = { name: 'found', finding: { ...found, pianoId: this.pianoId } };
	}

	private fail(error: unknown): void {
		const text =
			error instanceof MicrophoneError
				? error.text
				: {
						title: 'The measurement broke off.',
						text: sentenceOf(error),
						steps: ['Press Ask again and strike once more.']
					};
		this.begin({ name: 'fault', text });
	}
}

function sentenceOf(error: unknown): string {
	const known = error instanceof AudioRefusedError || error instanceof AnalysisFailedError;
	return known ? error.message : new AnalysisFailedError().message;
}
