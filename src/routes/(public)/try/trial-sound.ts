/** The sound of the listening trial and what is shown of it afterwards. Loaded when Listen is pressed. */
import { pianoModel } from '$lib/acoustics/piano-model';
import { partialHzFromF1 } from '$lib/acoustics/stiff-string';
import { loudestPartial, unisonAtPartial } from '$lib/acoustics/unison';
import { equalTemperamentHz, noteName, ratioFromCents } from '$lib/acoustics/units';
import type { Shore } from '$lib/components/charts/shore';
import { generateOddOneTrial, oddOneStringsCents } from '$lib/drills/odd-one';
import type { OddOneTrialSpec } from '$lib/drills/types';
import { partialEnvelope } from '$lib/synthesis/dsp/partial-envelope';
import { createToneEngine } from '$lib/synthesis/engine';
import type { VoiceSpec } from '$lib/synthesis/types';
import { TONE_MS, TONES, type ToneIndex, type TrialParts, type TrialReveal } from './trial-parts';

function voiceOf(trial: OddOneTrialSpec, tone: ToneIndex): VoiceSpec {
	const f1Hz = equalTemperamentHz(trial.midi);
	return {
		id: `tone-${tone}`,
		piano: trial.piano,
		midi: trial.midi,
		velocity: trial.velocityPercent / 100,
		stringsF1Hz: oddOneStringsCents(trial, tone).map((cents) => f1Hz * ratioFromCents(cents))
	};
}

/** What sounded, from the strings themselves, at the partial that is loudest. */
export function revealOf(trial: OddOneTrialSpec): TrialReveal {
	const piano = pianoModel(trial.piano);
	const partial = loudestPartial(piano, trial.midi, trial.velocityPercent / 100);
	const voices = TONES.map((tone) => voiceOf(trial, tone));
	const partialHz = partialHzFromF1(
		partial,
		equalTemperamentHz(trial.midi),
		piano.inharmonicity(trial.midi)
	);
	const seconds = TONE_MS / 1000;
	const shores = voices.map((voice): Shore => {
		const { timesS, levelDb, quietestS } = partialEnvelope([voice], partialHz, seconds, 1200);
		return { timesS, levelDb, beatsS: quietestS };
	});
	const odd = voices[trial.answer].stringsF1Hz;
	return {
		answer: trial.answer,
		note: noteName(trial.midi),
		partial,
		partialHz,
		rateHz: unisonAtPartial(piano, trial.midi, partial, odd).rateHz,
		spreadCents: trial.spreadCents,
		seconds,
		shores
	};
}

export const trialParts: TrialParts = {
	createEngine: createToneEngine,
	trial: generateOddOneTrial,
	strike: (engine, trial, tone) => engine.strike(voiceOf(trial, tone)),
	damp: (engine, tone) => engine.damp(`tone-${tone}`),
	reveal: revealOf
};
