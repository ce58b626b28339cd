/** The room's door for pianos: types, the shipped models, and models written out. */
export {
	HIGHEST_PARTIAL,
	type InlinePiano,
	type PartialTone,
	type PianoModel,
	type PianoSpec
} from './piano-types';
export {
	KEYBOARD,
	PIANO_IDS,
	PianoSpecError,
	isPianoId,
	pianoFromSpec,
	pianoModel,
	type PianoId
} from './piano-spec';
export {
	AUDIBLE_LIMIT_HZ,
	LEVEL_WINDOW_S,
	loneStringDecayDbPerSecond,
	strikeLevel
} from './piano-tone';
