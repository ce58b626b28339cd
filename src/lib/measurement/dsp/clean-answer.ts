import type { BandSignal } from './band';
import {
	bandAnswer,
	REASONS,
	wholeWindow,
	type BandAnswer,
	type BandQuestion
} from './band-answer';
import { audibleComponents } from './clusters';
import { fitNextOrder, type OrderFit } from './orders';
import { nearExpected } from './rate-rule';
import { fisherSd, FLOOR_HZ, studentQuantile95 } from './rate-width';
import type { Component } from './refine';
import { whitePeakLimit } from './residual';
import { beating, notMeasurable, still, type BandVerdict } from './verdict';

/** A residual this low is no model error worth the name, white or not. */
const CLEAN_DB = -48;

/**
 * The order at which the rest is noise alone, if that happens within `maxOrder` components:
 * no further component gains more than 4·ln(2N) + 4 of twice the log-likelihood.
 */
export function cleanOrder(band: BandSignal, fits: OrderFit[], maxOrder: number): OrderFit | null {
	const samples = band.z.length / 2;
	const limit = whitePeakLimit(samples, band.rateHz, band.passHz);
	for (let order = 1; order <= maxOrder; order++) {
		if (fits.length < order) {
			const next = fitNextOrder(band, fits[fits.length - 1] ?? null);
			if (!next) return null;
			fits.push(next);
		}
		const fit = fits[order - 1];
		if (fit.residualDb < CLEAN_DB) return fit;
		if (fit.rest.peakOverMean > limit) continue;
		if (fits.length === order) {
			const next = fitNextOrder(band, fit);
			if (next) fits.push(next);
		}
		const next = fits[order];
		if (!next) return fit;
		const variance = next.rest.variance || 1e-30;
		const gain = (2 * (fit.fit.residualEnergy - next.fit.residualEnergy)) / variance;
		if (gain < 4 * Math.log(2 * samples) + 4) return fit;
	}
	return null;
}

/** Answer where one, two (or three) damped components and noise are the whole story. */
export function cleanAnswer(band: BandSignal, order: OrderFit, question: BandQuestion): BandAnswer {
	const window = wholeWindow(band);
	const seconds = band.z.length / 2 / band.rateHz;
	const heard = audibleComponents(order.fit.components, window, -26, band.passHz + 2);
	const limit = stillLimit(order, seconds);
	const done = (main: BandVerdict, others: BandVerdict[] = []): BandAnswer =>
		bandAnswer(main, others, question, band, heard);
	if (heard.length === 0) return done(notMeasurable(REASONS.tooWeak));
	if (heard.length === 1) {
		return done(question.kind === 'unison' ? still(limit) : notMeasurable(REASONS.oneByOne));
	}
	const verdicts = pairVerdicts(order, heard, limit, seconds, band.passHz, question);
	const [main, ...others] = verdicts;
	return done(
		main,
		others.filter(({ verdict }) => verdict === 'beating')
	);
}

/** The verdicts on all pairs of components: those that beat first, the strongest pair first. */
function pairVerdicts(
	order: OrderFit,
	heard: Component[],
	limit: number,
	seconds: number,
	passHz: number,
	question: BandQuestion
): BandVerdict[] {
	const freedom = Math.max(3, 2 * passHz * seconds - 4 * order.order);
	const found: { verdict: BandVerdict; strength: number }[] = [];
	for (let i = 0; i < heard.length; i++) {
		for (let j = i + 1; j < heard.length; j++) {
			const rate = Math.abs(heard[j].hz - heard[i].hz);
			const half = Math.hypot(
				studentQuantile95(freedom) * fisherSd(order, [heard[i]], [heard[j]]),
				order.order > 2 ? (rate * seconds < 2 ? 0.4 : 0.06) / seconds : 0,
				FLOOR_HZ
			);
			const strength = Math.min(heard[i].energy, heard[j].energy);
			const fading = Math.abs(heard[j].decayPerSecond - heard[i].decayPerSecond);
			// One is gone before a beat is complete: locked strings, or as good as locked.
			const locked = 2 * Math.PI * rate <= fading;
			const least = locked ? Math.max(limit, rate + half) : limit;
			found.push({ verdict: cleanVerdict(rate, half, least, question), strength });
		}
	}
	// Where any pair beats the sound is not still, so beating pairs come first.
	const rank = (verdict: BandVerdict): number => (verdict.verdict === 'beating' ? 0 : 1);
	return found
		.sort((a, b) => rank(a.verdict) - rank(b.verdict) || b.strength - a.strength)
		.map(({ verdict }) => verdict);
}

function cleanVerdict(
	rate: number,
	half: number,
	limit: number,
	{ kind, expected }: BandQuestion
): BandVerdict {
	// Two components of one note are not the interval's beat.
	if (expected && !nearExpected(rate, expected)) return notMeasurable(REASONS.oneByOne);
	if (rate < Math.max(limit, 1.5 * half)) {
		return kind === 'unison' && half <= 0.15
			? still(Math.max(limit, rate + half))
			: notMeasurable(kind === 'unison' ? REASONS.uncertain : REASONS.oneByOne);
	}
	return beating(rate, half, null, REASONS.uncertain);
}

/** The smallest beat that would have been seen: 0.15, 0.1, 0.05 b/s after 1, 2, 4 s at 20 dB. */
function stillLimit(order: OrderFit, seconds: number): number {
	const strongest = Math.max(...order.fit.components.map((part) => part.energy));
	const snrDb = 10 * Math.log10(strongest / (order.fit.residualEnergy + 1e-300));
	const weak = snrDb < 20 ? 10 ** ((20 - snrDb) / 20) : 1;
	return (weak * 0.2) / Math.max(0.5, seconds);
}
