import { centsBetween, noteName, type Hertz } from '../../acoustics/units';
import type { TrialResult, TrialSpec } from '../../drills/types';
import { trialName } from '../../drills/words';
import { partialEnvelope } from '../../synthesis/dsp/partial-envelope';
import type { Shore } from '../charts/shore';
import { trialVoices } from './voices';

/** Length of the time axis, seconds. */
export const SHORE_SECONDS = 4;
const POINTS = 640;

/** Loudness of the judged partial with the moving string `cents` above its target. */
export function trialShore(spec: TrialSpec, cents: number, partialHz: Hertz): Shore {
	const { timesS, levelDb, quietestS } = partialEnvelope(
		trialVoices(spec, cents),
		partialHz,
		SHORE_SECONDS,
		POINTS
	);
	return { timesS, levelDb, beatsS: quietestS };
}

/** "A5, as A3–D4 sounds there": where the pictured partial lies. */
export function shoreTitle(spec: TrialSpec, result: TrialResult): string {
	const midi = 69 + centsBetween(result.partialHz, 440) / 100;
	const who =
		spec.drill === 'unison'
			? `the two strings of ${trialName(spec)} sound`
			: `${trialName(spec)} sounds`;
	return `${noteName(midi)}, as ${who} there`;
}
