import { bandShape, extractBand, type BandSignal, type ClipSpectrum } from './band';
import { audibleComponents, visibleSeconds, type SplitWindow } from './clusters';
import { chooseOrder, fitNextOrder, refitFrom, type OrderFit, type OrderLimits } from './orders';
import {
	intervalRate,
	nearExpected,
	unisonRate,
	type ExpectedPlaces,
	type RuledRate,
	type Unruled
} from './rate-rule';
import { fisherSd, FLOOR_HZ, modelHalfWidth, studentQuantile95 } from './rate-width';
import { whitePeakLimit } from './residual';
import { beating, notMeasurable, still, type BandVerdict } from './verdict';

/** What is asked of one band. */
export interface BandQuestion {
	centreHz: number;
	/** Distance to the nearest partial that does not belong to the pair. */
	spacingHz: number;
	kind: 'unison' | 'interval';
	/** Where the two notes should be, for an interval whose notes are known. */
	expected: ExpectedPlaces | null;
	/** The strike, and the end of the sound, in seconds from the start of the clip. */
	strikeSeconds: number;
	endSeconds: number;
}

export interface BandAnswer {
	main: BandVerdict;
	/** Further rates heard in the same band, strongest first. */
	others: BandVerdict[];
	/** Window used, in seconds from the strike. */
	windowSeconds: [number, number];
	/** Absolute frequencies of the audible components, strongest first. */
	componentsHz: number[];
}

const SKIP_SECONDS = 0.08;
const INTERVAL_WINDOW = [0.2, 2.7] as const;
const UNISON_LIMITS: OrderLimits = { maxOrder: 7, gainDb: 2, enoughDb: -30 };
const INTERVAL_LIMITS: OrderLimits = { maxOrder: 7, gainDb: 1.2, enoughDb: -36 };
/** A residual this low is no model error worth the name, white or not. */
const CLEAN_DB = -48;
const HOPELESS_DB = -12;
const MIN_SNR_DB = 6;

const TOO_WEAK = 'This partial is too weak here.';
const TOO_SHORT = 'The sound is too short here.';
const SEVERAL = 'Several strings move at once here; no single rate stands out.';
const SWELL =
	'A slow swell covers everything else here; let the sound ring longer or mute one string.';
const UNCERTAIN = 'The rate is too uncertain here; let the sound ring longer.';
const ONE_BY_ONE =
	'Too close to tell the two notes apart; strike the notes one after the other first.';

/** Measures the beat in one band of a clip. */
export function measureBand(clip: ClipSpectrum, question: BandQuestion): BandAnswer {
	const from = question.strikeSeconds + SKIP_SECONDS;
	const shape = bandShape(question.spacingHz);
	const band = extractBand(clip, question.centreHz, shape, from, question.endSeconds);
	if (!band || band.z.length / 2 < 0.35 * band.rateHz) {
		return answer(notMeasurable(TOO_SHORT), [], question, band, []);
	}
	const fits: OrderFit[] = [];
	const clean = cleanOrder(band, fits, question.kind === 'unison' ? 3 : 2);
	if (fits.length === 0) return answer(notMeasurable(TOO_WEAK), [], question, band, []);
	if (!hasTone(band, fits[0])) return answer(notMeasurable(TOO_WEAK), [], question, band, []);
	return clean ? cleanAnswer(band, clean, question) : modelAnswer(clip, band, fits, question);
}

function answer(
	main: BandVerdict,
	others: BandVerdict[],
	question: BandQuestion,
	band: BandSignal | null,
	parts: { hz: number; energy: number }[],
	window?: SplitWindow
): BandAnswer {
	const start = (band?.startSeconds ?? question.strikeSeconds) - question.strikeSeconds;
	const length = band ? band.z.length / 2 / band.rateHz : 0;
	const windowSeconds: [number, number] =
		band && window
			? [start + window.from / band.rateHz, start + window.to / band.rateHz]
			: [start, start + length];
	const componentsHz = parts
		.slice()
		.sort((a, b) => b.energy - a.energy)
		.map((part) => (band?.centreHz ?? 0) + part.hz);
	return { main, others, windowSeconds, componentsHz };
}

/** Whether one component stands out of the noise at all. */
function hasTone(band: BandSignal, first: OrderFit): boolean {
	const noise = first.rest.variance * (band.z.length / 2);
	const strongest = first.fit.components[0].energy;
	const lines = (2 * band.passHz * band.z.length) / 2 / band.rateHz;
	const threshold = Math.max(
		10 ** (MIN_SNR_DB / 10) * first.rest.variance * Math.log(lines + 3),
		0
	);
	// Energy of a component is seen against the noise of one independent line, not of the band.
	return strongest > Math.max(8 * threshold, 1e-3 * noise);
}

/**
 * The order at which the rest is noise alone, if that happens within `maxOrder` components:
 * no further component gains more than 4·ln(2N) + 4 of twice the log-likelihood.
 */
function cleanOrder(band: BandSignal, fits: OrderFit[], maxOrder: number): OrderFit | null {
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

function wholeWindow(band: BandSignal): SplitWindow {
	return { rateHz: band.rateHz, from: 0, to: band.z.length / 2 - 1 };
}

/** Answer where one, two (or three) damped components and noise are the whole story. */
function cleanAnswer(band: BandSignal, order: OrderFit, question: BandQuestion): BandAnswer {
	const window = wholeWindow(band);
	const seconds = band.z.length / 2 / band.rateHz;
	const heard = audibleComponents(order.fit.components, window, -26, band.passHz + 2);
	const limit = stillLimit(order, seconds);
	const done = (main: BandVerdict, others: BandVerdict[] = []): BandAnswer =>
		answer(main, others, question, band, heard);
	if (heard.length === 0) return done(notMeasurable(TOO_WEAK));
	if (heard.length === 1) {
		return done(question.kind === 'unison' ? still(limit) : notMeasurable(ONE_BY_ONE));
	}
	const freedom = Math.max(3, 2 * band.passHz * seconds - 4 * order.order);
	const verdicts: { verdict: BandVerdict; strength: number }[] = [];
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
			verdicts.push({ verdict: cleanVerdict(rate, half, least, question), strength });
		}
	}
	verdicts.sort((a, b) => b.strength - a.strength);
	const [main, ...others] = verdicts.map(({ verdict }) => verdict);
	return done(
		main,
		others.filter(({ verdict }) => verdict === 'beating')
	);
}

function cleanVerdict(
	rate: number,
	half: number,
	limit: number,
	{ kind, expected }: BandQuestion
): BandVerdict {
	// Two components of one note are not the interval's beat.
	if (expected && !nearExpected(rate, expected)) return notMeasurable(ONE_BY_ONE);
	if (rate < Math.max(limit, 1.5 * half)) {
		return kind === 'unison' && half <= 0.15
			? still(Math.max(limit, rate + half))
			: notMeasurable(kind === 'unison' ? UNCERTAIN : ONE_BY_ONE);
	}
	return beating(rate, half, null, UNCERTAIN);
}

/** The smallest beat that would have been seen: 0.15, 0.1, 0.05 b/s after 1, 2, 4 s at 20 dB. */
function stillLimit(order: OrderFit, seconds: number): number {
	const strongest = Math.max(...order.fit.components.map((part) => part.energy));
	const snrDb = 10 * Math.log10(strongest / (order.fit.residualEnergy + 1e-300));
	const weak = snrDb < 20 ? 10 ** ((20 - snrDb) / 20) : 1;
	return (weak * 0.2) / Math.max(0.5, seconds);
}

/** Answer for a richer sound: orders up to 7, groups of components, width from variants. */
function modelAnswer(
	clip: ClipSpectrum,
	band: BandSignal,
	fits: OrderFit[],
	question: BandQuestion
): BandAnswer {
	const interval = question.kind === 'interval';
	const chosen = chooseOrder(band, fits, interval ? INTERVAL_LIMITS : UNISON_LIMITS);
	const window = windowOf(band, question);
	const heard = audibleComponents(chosen.fit.components, window, -26, band.passHz + 2);
	const done = (main: BandVerdict, others: BandVerdict[] = []): BandAnswer =>
		answer(main, others, question, band, heard, window);
	if (chosen.residualDb > HOPELESS_DB) return done(notMeasurable(SEVERAL));
	const ruled = ruledRate(band, chosen, question);
	if (ruled === 'masked') return done(notMeasurable(SWELL));
	if (ruled === 'unclear') return done(notMeasurable(SEVERAL));
	if (!ruled) {
		if (interval) return done(notMeasurable(ONE_BY_ONE));
		return done(still(1.5 / visibleSeconds(heard, window)));
	}
	const variants = variantRates(clip, band, fits, chosen, question);
	const near = variants.filter((rate) => rate !== null && agrees(rate, ruled)) as number[];
	if (near.length < variants.length / 2) return done(notMeasurable(SEVERAL));
	const half = modelHalfWidth({
		ruled,
		fisherSdHz: fisherSd(chosen, ruled.split.low, ruled.split.high),
		rivalRatesHz: ruled.rivals.map(({ rateHz }) => rateHz),
		variantRatesHz: near,
		seconds: (window.to - window.from) / band.rateHz
	});
	return done(beating(ruled.split.rateHz, half, null, SEVERAL));
}

function windowOf(band: BandSignal, question: BandQuestion): SplitWindow {
	const whole = wholeWindow(band);
	if (question.kind === 'unison') return whole;
	const offset = band.startSeconds - question.strikeSeconds;
	return {
		rateHz: band.rateHz,
		from: Math.max(0, Math.round((INTERVAL_WINDOW[0] - offset) * band.rateHz)),
		to: Math.min(whole.to, Math.round((INTERVAL_WINDOW[1] - offset) * band.rateHz))
	};
}

function ruledRate(
	band: BandSignal,
	fit: OrderFit,
	question: BandQuestion
): RuledRate | Unruled | null {
	const window = windowOf(band, question);
	const maxHz = band.passHz + 2;
	if (question.kind === 'unison') return unisonRate(fit, window, maxHz);
	const shifted = question.expected && {
		...question.expected,
		lowHz: question.expected.lowHz + question.centreHz - band.centreHz,
		highHz: question.expected.highHz + question.centreHz - band.centreHz
	};
	return intervalRate(fit, window, maxHz, shifted);
}

function rateOf(ruled: RuledRate | Unruled | null): number | null {
	return ruled === null || typeof ruled === 'string' ? null : ruled.split.rateHz;
}

function agrees(rate: number, ruled: RuledRate): boolean {
	return Math.abs(rate - ruled.split.rateHz) <= Math.max(0.15, 0.12 * ruled.split.rateHz);
}

/** The same question put to other orders and other windows. */
function variantRates(
	clip: ClipSpectrum,
	band: BandSignal,
	fits: OrderFit[],
	chosen: OrderFit,
	question: BandQuestion
): (number | null)[] {
	const rates: (number | null)[] = [];
	for (const order of [chosen.order - 1, chosen.order + 1, chosen.order + 2]) {
		if (order < 2) continue;
		while (fits.length < order) {
			const next = fitNextOrder(band, fits[fits.length - 1]);
			if (!next) break;
			fits.push(next);
		}
		const fit = fits[order - 1];
		if (fit) rates.push(rateOf(ruledRate(band, fit, question)));
	}
	const skip = Math.round(0.15 * band.rateHz);
	const samples = band.z.length / 2;
	const late = part(band, skip, samples);
	const early = part(band, 0, Math.round(0.75 * samples));
	for (const cut of [late, early]) {
		const fit = refitFrom(cut, chosen.fit.components);
		if (fit) rates.push(rateOf(ruledRate(cut, fit, question)));
	}
	return rates;
}

function part(band: BandSignal, from: number, to: number): BandSignal {
	return {
		...band,
		z: band.z.slice(2 * from, 2 * to),
		startSeconds: band.startSeconds + from / band.rateHz
	};
}
