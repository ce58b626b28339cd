import { partialHzFromF1 } from '../../acoustics/stiff-string';
import type { Hertz, Midi } from '../../acoustics/units';
import type { CheckPair } from '../../drills/checks';
import { intervalNotesHz, intervalPartialHz } from '../../drills/interval-score';
import { tunedPiano } from '../../drills/tuned-piano';
import type { IntervalTrialSpec, TrialSpec } from '../../drills/types';
import { unisonPartial, unisonStringsHz, velocityOf } from '../../drills/unison-score';
import type { VoiceSpec } from '../../synthesis/types';

/** Which strings a blow sounds. */
export type Sounding = 'both' | 'fixed' | 'moving';

/** The voices of a trial with the moving string `cents` above its target. */
export function trialVoices(
	spec: TrialSpec,
	cents: number,
	sounding: Sounding = 'both'
): VoiceSpec[] {
	if (spec.drill === 'unison') {
		return [
			{
				id: 'unison',
				piano: spec.piano,
				midi: spec.midi,
				velocity: velocityOf(spec),
				stringsF1Hz: [...unisonStringsHz(spec, cents)],
				muted: [sounding === 'moving', sounding === 'fixed']
			}
		];
	}
	const { lowHz, highHz } = intervalNotesHz(spec, cents);
	const low = voice(spec, 'low', spec.lowMidi, lowHz);
	const high = voice(spec, 'high', spec.highMidi, highHz);
	const [fixed, moving] = spec.moving === 'high' ? [low, high] : [high, low];
	return { both: [low, high], fixed: [fixed], moving: [moving] }[sounding];
}

/** Every voice that a trial may have sounding. */
export const VOICE_IDS = ['unison', 'low', 'high', 'check-low', 'check-high'] as const;

/** The voice and string that follow the lever, and where they go. */
export function movedString(
	spec: TrialSpec,
	cents: number
): { voiceId: string; stringIndex: number; f1Hz: Hertz } {
	if (spec.drill === 'unison') {
		return { voiceId: 'unison', stringIndex: 1, f1Hz: unisonStringsHz(spec, cents)[1] };
	}
	const { lowHz, highHz } = intervalNotesHz(spec, cents);
	return { voiceId: spec.moving, stringIndex: 0, f1Hz: spec.moving === 'low' ? lowHz : highHz };
}

/** The two notes of one half of a check; the moving note sounds as it stands. */
export function checkVoices(spec: IntervalTrialSpec, cents: number, pair: CheckPair): VoiceSpec[] {
	return [
		voice(spec, 'check-low', pair.lowMidi, noteHz(spec, cents, pair.lowMidi)),
		voice(spec, 'check-high', pair.highMidi, noteHz(spec, cents, pair.highMidi))
	];
}

/** Where the partials meet: the pitch that the help key plays. It never moves with the lever. */
export function judgedPartialHz(spec: TrialSpec): Hertz {
	if (spec.drill === 'interval') return intervalPartialHz(spec);
	const { model } = tunedPiano(spec.piano);
	const [fixedHz] = unisonStringsHz(spec, 0);
	return partialHzFromF1(unisonPartial(spec), fixedHz, model.inharmonicity(spec.midi));
}

function noteHz(spec: IntervalTrialSpec, cents: number, midi: Midi): Hertz {
	const { lowHz, highHz } = intervalNotesHz(spec, cents);
	if (midi === spec.lowMidi) return lowHz;
	if (midi === spec.highMidi) return highHz;
	return tunedPiano(spec.piano).tuning.f1Hz(midi);
}

function voice(spec: IntervalTrialSpec, id: string, midi: Midi, f1Hz: Hertz): VoiceSpec {
	return { id, piano: spec.piano, midi, velocity: velocityOf(spec), stringsF1Hz: [f1Hz] };
}
