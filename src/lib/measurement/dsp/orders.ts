import type { BandSignal } from './band';
import { espritPoles } from './esprit';
import { energyOf, refinePoles, residualOf, type Pole, type PoleFit } from './refine';
import { residualSpectrum, type ResidualSpectrum } from './residual';

/** The best fit found with a given number of components. */
export interface OrderFit {
	order: number;
	fit: PoleFit;
	/** Residual energy re the band's energy, dB. */
	residualDb: number;
	rest: ResidualSpectrum;
	/**
	 * Components that nearly cancel each other: their energies together far exceed the band's, so
	 * they say nothing about strings.
	 */
	degenerate: boolean;
}

export interface OrderLimits {
	maxOrder: number;
	/** A further component must lower the residual by this much, looking one ahead. */
	gainDb: number;
	/** A residual below this is good enough. */
	enoughDb: number;
}

const QUICK_ITERATIONS = 10;
const FULL_ITERATIONS = 40;
const POOR_DB = -20;
const DEGENERATE_SHARE = 10;

function optionsFor(band: BandSignal, iterations: number) {
	return { rateHz: band.rateHz, iterations, maxHz: band.passHz + 2, minDecayPerSecond: -0.05 };
}

/** Fit from the best of several starts, refined fully; null when none converges. */
function bestOf(band: BandSignal, starts: Pole[][]): PoleFit | null {
	let best: PoleFit | null = null;
	for (const start of starts) {
		const fit = refinePoles(band.z, start, optionsFor(band, QUICK_ITERATIONS));
		if (fit && (!best || fit.residualEnergy < best.residualEnergy)) best = fit;
	}
	return best && refinePoles(band.z, best.components, optionsFor(band, FULL_ITERATIONS));
}

/** Starts that grow out of the fit with one component less. */
function grownStarts(band: BandSignal, previous: OrderFit | null): Pole[][] {
	if (!previous) {
		const peakHz = residualSpectrum(band.z, band.rateHz, band.passHz).peakHz;
		return [0.4, 3].map((decayPerSecond) => [{ hz: peakHz, decayPerSecond }]);
	}
	const kept: Pole[] = previous.fit.components;
	const seconds = band.z.length / 2 / band.rateHz;
	const peakHz = previous.rest.peakHz;
	const starts = [0.3, 4].map((decayPerSecond) => [...kept, { hz: peakHz, decayPerSecond }]);
	let strongest = 0;
	previous.fit.components.forEach((part, k, all) => {
		if (part.energy > all[strongest].energy) strongest = k;
	});
	const others = kept.filter((_, k) => k !== strongest);
	const { hz, decayPerSecond } = kept[strongest];
	for (const apart of [0.35 / seconds, 1.1 / seconds]) {
		starts.push([
			...others,
			{ hz: hz - apart / 2, decayPerSecond },
			{ hz: hz + apart / 2, decayPerSecond: decayPerSecond * 1.2 + 0.05 }
		]);
	}
	starts.push([
		...others,
		{ hz: hz - 0.02 / seconds, decayPerSecond: 0.4 * decayPerSecond },
		{ hz: hz + 0.02 / seconds, decayPerSecond: 1.6 * decayPerSecond + 0.1 }
	]);
	return starts;
}

function espritStarts(band: BandSignal, order: number): Pole[][] {
	const starts: Pole[][] = [];
	for (const stride of order <= 2 ? [1] : [1, 3]) {
		const poles = espritPoles(band.z, band.rateHz, order, stride);
		if (poles.length === order) starts.push(poles);
	}
	return starts;
}

/** The fit with one component more than `previous` (with one when there is none). */
export function fitNextOrder(band: BandSignal, previous: OrderFit | null): OrderFit | null {
	const order = (previous?.order ?? 0) + 1;
	const starts = [...espritStarts(band, order), ...grownStarts(band, previous)];
	const fit = bestOf(band, starts);
	return fit && describeFit(band, fit);
}

/** The same number of components, started from a known fit (for variants of the window). */
export function refitFrom(band: BandSignal, poles: readonly Pole[]): OrderFit | null {
	const fit = refinePoles(band.z, poles, optionsFor(band, FULL_ITERATIONS));
	return fit && describeFit(band, fit);
}

function describeFit(band: BandSignal, fit: PoleFit): OrderFit {
	const rest = residualSpectrum(residualOf(band.z, fit, band.rateHz), band.rateHz, band.passHz);
	const total = energyOf(band.z);
	const residualDb = 10 * Math.log10((fit.residualEnergy + 1e-16 * total) / (total + 1e-300));
	const parts = fit.components.reduce((sum, part) => sum + part.energy, 0);
	return {
		order: fit.components.length,
		fit,
		residualDb,
		rest,
		degenerate: parts > DEGENERATE_SHARE * total
	};
}

/**
 * The order for a real string: go on while a step (or the next one together with it) lowers the
 * residual enough and the residual is not yet small.
 * @param fits fits of orders 1, 2, ... ; extended in place as far as needed
 */
export function chooseOrder(band: BandSignal, fits: OrderFit[], limits: OrderLimits): OrderFit {
	const upTo = (order: number): OrderFit | null => {
		while (fits.length < order && fits.length < limits.maxOrder) {
			const next = fitNextOrder(band, fits[fits.length - 1] ?? null);
			if (!next) return null;
			fits.push(next);
		}
		return fits[order - 1] ?? null;
	};
	let chosen = upTo(1);
	if (!chosen) throw new RangeError('a band without any fit');
	while (chosen.residualDb > limits.enoughDb) {
		const next = upTo(chosen.order + 1);
		if (!next) break;
		// While much of the sound is unexplained, small steps count too.
		const gainDb = chosen.residualDb > POOR_DB ? Math.min(1, limits.gainDb) : limits.gainDb;
		if (!next.degenerate && chosen.residualDb - next.residualDb >= gainDb) {
			chosen = next;
			continue;
		}
		const ahead = upTo(chosen.order + 2);
		if (!ahead || ahead.degenerate || chosen.residualDb - ahead.residualDb < 2 * gainDb) break;
		chosen = ahead;
	}
	return chosen;
}
