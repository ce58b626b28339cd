import { bandShape, extractBand, type BandSignal, type ClipSpectrum } from './band';
import { bandAnswer, REASONS, type BandAnswer, type BandQuestion } from './band-answer';
import { cleanAnswer, cleanOrder } from './clean-answer';
import { modelAnswer } from './model-answer';
import type { OrderFit } from './orders';
import { notMeasurable } from './verdict';

const SKIP_SECONDS = 0.08;
const SHORTEST_SECONDS = 0.28;
/** A component's energy over that of the noise's highest line (15 dB). */
const TONE_OVER_NOISE = 32;

/** Measures the beat in one band of a clip. */
export function measureBand(clip: ClipSpectrum, question: BandQuestion): BandAnswer {
	const from = question.strikeSeconds + SKIP_SECONDS;
	const shape = bandShape(question.spacingHz);
	const band = extractBand(clip, question.centreHz, shape, from, question.endSeconds);
	if (!band || band.z.length / 2 < SHORTEST_SECONDS * band.rateHz) {
		return bandAnswer(notMeasurable(REASONS.tooShort), [], question, band, []);
	}
	const fits: OrderFit[] = [];
	const clean = cleanOrder(band, fits, question.kind === 'unison' ? 3 : 2);
	if (fits.length === 0 || !hasTone(band, fits[0]))
		return bandAnswer(notMeasurable(REASONS.tooWeak), [], question, band, []);
	return clean ? cleanAnswer(band, clean, question) : modelAnswer(band, fits, question);
}

/** Whether one component stands out of the noise at all. */
function hasTone(band: BandSignal, first: OrderFit): boolean {
	const samples = band.z.length / 2;
	const lines = (2 * band.passHz * samples) / band.rateHz;
	// Energy of a component is seen against the highest of that many lines of noise.
	const noise = first.rest.variance * Math.log(lines + 3);
	const strongest = first.fit.components[0].energy;
	return strongest > Math.max(TONE_OVER_NOISE * noise, 1e-3 * first.rest.variance * samples);
}
