import type { VoicePlan } from '../dsp/voice-plan';

/** Name under which the processor is registered. */
export const STRINGS_PROCESSOR = 'ebbtone-strings';

/** What the engine tells the audio thread. Voices go by their place in the bank. */
export type StringsMessage =
	| { type: 'strike'; slot: number; plan: VoicePlan }
	| { type: 'retune'; slot: number; string: number; f1Hz: number }
	| { type: 'mute'; slot: number; string: number; muted: boolean }
	| { type: 'damp'; slot: number }
	| { type: 'stop' }
	| { type: 'level'; linear: number }
	| { type: 'close' };
