import type { PartId, StepId } from '$lib/course';

/** Where a student is, as the sentence of the page. */
export const PLACE: Readonly<Record<StepId, string>> = {
	ready: 'You are getting ready.',
	'mute-strip': 'You are at the mute strip.',
	fork: 'You are at the fork.',
	temperament: 'You are in the temperament octave.',
	octaves: 'You are going outward by octaves.',
	unisons: 'You are at the unisons.',
	final: 'You are at the final check.'
};

const DO: Partial<Record<StepId, string>> = {
	fork: 'A4 to the fork is a unison: two strings brought together until nothing beats.',
	temperament:
		'F3 to F4: each interval is left beating at its own rate, on its own side of beatless.',
	unisons: 'Every string of every note, as close as a working tuner leaves it.'
};

const REAL: Partial<Record<StepId, string>> = {
	fork: 'The exercises are behind you. What is left is the same on a real string.',
	temperament: 'The exercises are behind you. What is left is the same on a real string.'
};

/** What the work at this place is. */
export function workWords(stepId: StepId, partId: PartId): string {
	const words = partId === 'real' ? REAL[stepId] : DO[stepId];
	return words ?? 'Everything recorded so far is done.';
}
