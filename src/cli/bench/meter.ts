import path from 'node:path';
import { PitchDetector } from 'pitchy';
import {
	bandShape,
	clipSpectrum,
	extractBand,
	type BandSignal
} from '../../lib/measurement/dsp/band';
import { measureBand } from '../../lib/measurement/dsp/band-measure';
import { complexSpectrum, powerOfTwoAbove } from '../../lib/measurement/dsp/fourier';
import { measureClip } from '../../lib/measurement/dsp/measure-clip';
import { scoreRecordings, type ScoredRow } from '../../lib/measurement/testing/recordings-score';
import { createUniform, stiffTone } from '../../lib/measurement/testing/signals';
import { benchLine, quantile, type BenchLine } from './line';

const RATE = 48000;
const SECONDS = 4;
const INHARMONICITY = 2e-4;
const PARTIALS = [1, 2, 3, 4, 5, 6, 7, 8];

interface Trial {
	samples: Float32Array;
	midi: number;
	f1Hz: number;
	/** f_1 of the second string. */
	secondHz: number;
}

function partialHz(n: number, f1Hz: number): number {
	return n * f1Hz * Math.sqrt((1 + INHARMONICITY * n * n) / (1 + INHARMONICITY));
}

/** Two strings a little apart, in noise 35 dB down; the same trials in every run. */
function trials(count: number): Trial[] {
	const uniform = createUniform(2024);
	return Array.from({ length: count }, (_, seed) => {
		const midi = 45 + Math.floor(25 * uniform());
		const f1Hz = 440 * 2 ** ((midi - 69 + 0.2 * uniform() - 0.1) / 12);
		const secondHz = f1Hz + 0.2 * 10 ** uniform();
		const strings = [f1Hz, secondHz].map((hz) => ({ f1Hz: hz, inharmonicity: INHARMONICITY }));
		const samples = stiffTone({
			sampleRateHz: RATE,
			seconds: SECONDS,
			strings,
			seed,
			snrDb: 35
		});
		return { samples, midi, f1Hz, secondHz };
	});
}

function timed<T>(work: () => T): { value: T; milliseconds: number } {
	const start = performance.now();
	const value = work();
	return { value, milliseconds: performance.now() - start };
}

/** The general method: the two highest peaks of the band's windowed spectrum. */
function peakPickedRate(band: BandSignal): number {
	const count = band.z.length / 2;
	const size = 8 * powerOfTwoAbove(count);
	const windowed = new Float64Array(2 * size);
	for (let n = 0; n < count; n++) {
		const hann = 0.5 - 0.5 * Math.cos((2 * Math.PI * (n + 0.5)) / count);
		windowed[2 * n] = band.z[2 * n] * hann;
		windowed[2 * n + 1] = band.z[2 * n + 1] * hann;
	}
	const bins = complexSpectrum(windowed);
	const power = (k: number): number => {
		const slot = (k + size) % size;
		return bins[2 * slot] ** 2 + bins[2 * slot + 1] ** 2;
	};
	const reach = Math.floor((band.passHz * size) / band.rateHz);
	const peaks: number[] = [];
	for (let k = -reach; k <= reach; k++) {
		if (power(k) > power(k - 1) && power(k) >= power(k + 1)) peaks.push(k);
	}
	peaks.sort((a, b) => power(b) - power(a));
	return peaks.length < 2 ? 0 : (Math.abs(peaks[0] - peaks[1]) * band.rateHz) / size;
}

/** Pitch of the fresh tone by the McLeod method, as a general tuner would read it. */
function pitchyHz(samples: Float32Array): number {
	const detector = PitchDetector.forFloat32Array(4096);
	const pitches: number[] = [];
	for (let from = 4800; from + 4096 <= RATE * 2; from += 2048) {
		pitches.push(detector.findPitch(samples.subarray(from, from + 4096), RATE)[0]);
	}
	return quantile(pitches, 0.5);
}

interface Errors {
	ours: number[];
	plain: number[];
	oursWithin: number;
	plainWithin: number;
}

function timesAndErrors(list: Trial[]): BenchLine[] {
	const clipMs: number[] = [];
	const pitchyMs: number[] = [];
	const cents: number[] = [];
	const pitchyCents: number[] = [];
	const errors: Errors = { ours: [], plain: [], oursWithin: 0, plainWithin: 0 };
	for (const trial of list) {
		const { samples, midi, f1Hz, secondHz } = trial;
		const ours = timed(() => measureClip(samples, RATE, { kind: 'unison', notes: [midi] }));
		const other = timed(() => pitchyHz(samples));
		clipMs.push(ours.milliseconds / SECONDS);
		pitchyMs.push(other.milliseconds / SECONDS);
		const middle = (f1Hz + secondHz) / 2;
		const error = (hz: number): number => Math.abs(1200 * Math.log2(hz / middle));
		cents.push(error(ours.value.notes[0].f1Hz ?? middle * 2));
		pitchyCents.push(error(other.value));
		collectErrors(trial, ours.value.pairs, errors);
	}
	const perSecond = { name: 'pitchy, pitch only', value: quantile(pitchyMs, 0.5) };
	const plain = (value: number) => ({ name: 'FFT peak picking', value });
	return [
		benchLine('measure, time per second of audio', quantile(clipMs, 0.5), 'ms', {
			reference: perSecond
		}),
		benchLine('f1 of two strings, error p95', quantile(cents, 0.95), 'cents', {
			reference: { name: 'pitchy', value: quantile(pitchyCents, 0.95) }
		}),
		benchLine('beat rate, error p95', quantile(errors.ours, 0.95), 'b/s', {
			reference: plain(quantile(errors.plain, 0.95))
		}),
		benchLine(
			'beat rate answers within tolerance',
			errors.oursWithin / errors.ours.length,
			'share',
			{
				bar: 0.995,
				atLeast: true,
				reference: plain(errors.plainWithin / errors.plain.length)
			}
		)
	];
}

function collectErrors(
	trial: Trial,
	pairs: ReturnType<typeof measureClip>['pairs'],
	errors: Errors
): void {
	const clip = clipSpectrum(trial.samples, RATE);
	for (const n of PARTIALS) {
		const truth = partialHz(n, trial.secondHz) - partialHz(n, trial.f1Hz);
		const tolerance = Math.max(0.05 * truth, 0.1);
		const pair = pairs.find(({ lowerPartial }) => lowerPartial === n);
		const band = extractBand(clip, partialHz(n, trial.f1Hz), bandShape(trial.f1Hz), 0.08, SECONDS);
		if (!band || truth > 19) continue;
		const plain = Math.abs(peakPickedRate(band) - truth);
		errors.plain.push(plain);
		if (plain <= tolerance) errors.plainWithin++;
		if (pair?.verdict !== 'beating') continue;
		const ours = Math.abs(pair.beatRateHz! - truth);
		errors.ours.push(ours);
		if (ours <= tolerance) errors.oursWithin++;
	}
}

/** Eight bands of four seconds on one core: the fits alone, the clip's spectrum ready. */
function bandTimes(list: Trial[]): BenchLine {
	const ours: number[] = [];
	const plain: number[] = [];
	for (const { samples, f1Hz } of list) {
		const clip = clipSpectrum(samples, RATE);
		const all = timed(() => {
			for (const n of PARTIALS) {
				const centreHz = partialHz(n, f1Hz);
				measureBand(clip, {
					centreHz,
					spacingHz: f1Hz,
					kind: 'unison',
					expected: null,
					strikeSeconds: 0,
					endSeconds: SECONDS
				});
			}
		});
		ours.push(all.milliseconds);
		const picked = timed(() => {
			for (const n of PARTIALS) {
				const band = extractBand(clip, partialHz(n, f1Hz), bandShape(f1Hz), 0.08, SECONDS);
				if (band) peakPickedRate(band);
			}
		});
		plain.push(picked.milliseconds);
	}
	return benchLine('8 bands of 4 s, median', quantile(ours, 0.5), 'ms', {
		bar: 80,
		reference: { name: 'FFT peak picking', value: quantile(plain, 0.5) }
	});
}

async function recordingLines(): Promise<BenchLine[]> {
	const folder = path.resolve(import.meta.dirname, '../../../fixtures/recordings');
	const rows = (await scoreRecordings(folder)).flatMap((clip) => clip.rows);
	const pick = (kind: string, kinds: string, confidence: string): ScoredRow[] =>
		rows.filter(
			({ row }) => row.kind === kind && row.class === kinds && confidence.includes(row.confidence)
		);
	const shareLine = (name: string, of: ScoredRow[], bar: number): BenchLine => {
		const right = of.filter(({ outcome }) => outcome === 'right').length;
		return benchLine(`recordings, ${name}, right`, right / of.length, 'share', {
			bar,
			atLeast: true
		});
	};
	const rated = rows.filter(({ row }) => row.class === 'beat' && row.confidence !== 'C');
	const wrong = rated.filter(({ outcome }) => outcome === 'wrong').length;
	return [
		shareLine('intervals A and B', pick('interval', 'beat', 'AB'), 0.7),
		shareLine('shifted copies A', pick('shift', 'beat', 'A'), 0.9),
		shareLine('single notes A', pick('note', 'beat', 'A'), 0.5),
		shareLine('slow or none A', pick('note', 'slow', 'A'), 0.96),
		benchLine('recordings, rows A and B, wrong', wrong / rated.length, 'share', { bar: 0.1 })
	];
}

/** The meter's time and errors beside general methods on the same signals, and the recordings. */
export async function lines(quick: boolean): Promise<BenchLine[]> {
	const list = trials(quick ? 6 : 40);
	// The first clips warm the compiler up and are measured again below.
	for (const { samples, midi } of list.slice(0, 3)) {
		measureClip(samples, RATE, { kind: 'unison', notes: [midi] });
	}
	const generated = [...timesAndErrors(list), bandTimes(list)];
	return quick ? generated : [...generated, ...(await recordingLines())];
}
