import { coupledModes } from '../../lib/acoustics/coupled-strings';
import { KEYBOARD, PIANO_IDS, pianoFromSpec, pianoModel } from '../../lib/acoustics/piano-model';
import { createRandom } from '../../lib/acoustics/random';
import { solveTargets, targetBeat } from '../../lib/acoustics/targets';
import { randomPiano } from '../../lib/acoustics/testing/random-piano';
import { benchLine, quantile, type BenchLine } from './line';

/** Milliseconds of each of `runs` calls after `warmUp` calls. */
function timings(call: (run: number) => void, runs: number, warmUp: number): number[] {
	for (let run = 0; run < warmUp; run += 1) call(run);
	return Array.from({ length: runs }, (_, run) => {
		const start = performance.now();
		call(run);
		return performance.now() - start;
	});
}

/** Largest 4:2 beat of the octaves F3–F4 to A3–A4 over pianos, b/s. */
function largestOctaveBeat(scatter: number, pianos: number): number {
	const random = createRandom(2);
	let largest = 0;
	for (let count = 0; count < pianos; count += 1) {
		const piano = randomPiano(random, scatter);
		const tuning = solveTargets(piano);
		for (let low = 53; low <= 57; low += 1) {
			const pair = { lowerPartial: 4, upperPartial: 2 };
			largest = Math.max(largest, targetBeat(piano, tuning, low, low + 12, pair).beatRateHz);
		}
	}
	return largest;
}

/** Figures of the target solver: time and the bars that are numbers. */
export async function lines(quick: boolean): Promise<BenchLine[]> {
	const runs = quick ? 60 : 400;
	const warm = timings((run) => solveTargets(pianoModel(PIANO_IDS[run % 3])), runs, 60);
	const random = createRandom(1);
	const scatteredPianos = Array.from({ length: 50 }, () => randomPiano(random, 0.05));
	const scattered = timings((run) => solveTargets(scatteredPianos[run % 50]), runs, 50);
	const modes = timings(
		() => {
			for (let k = 0; k < 100; k += 1) {
				coupledModes([2765, 2765.7 + k / 50, 2764.1], 0.3, { re: 0.7, im: 0.05 });
			}
		},
		runs,
		20
	);
	const flat = solveTargets(pianoFromSpec('0'));
	const offEqual = Math.max(...KEYBOARD.map((midi) => Math.abs(flat.cents(midi))));
	const pianos = quick ? 50 : 200;
	return [
		benchLine('targets: solve, warm, median', quantile(warm, 0.5), 'ms', { bar: 50 }),
		benchLine('targets: solve, warm, p95', quantile(warm, 0.95), 'ms', { bar: 50 }),
		benchLine('targets: solve with 5 % scatter in B, p95', quantile(scattered, 0.95), 'ms', {
			bar: 50
		}),
		benchLine('targets: no stiffness, largest offset from equal', offEqual, 'cents', {
			bar: 1e-9
		}),
		benchLine(
			`targets: 4:2 octaves, ${pianos} smooth pianos`,
			largestOctaveBeat(0, pianos),
			'b/s',
			{
				bar: 0.05
			}
		),
		benchLine(
			`targets: 4:2 octaves, ${pianos} pianos, 5 % scatter`,
			largestOctaveBeat(0.05, pianos),
			'b/s',
			{ bar: 0.2 }
		),
		benchLine('targets: modes of three coupled strings', quantile(modes, 0.5) * 10, 'µs')
	];
}
