import { ToneBank } from '../../lib/synthesis/dsp/tone-bank';
import { MAX_PARTIALS, planVoice, type VoicePlan } from '../../lib/synthesis/dsp/voice-plan';
import { benchLine, quantile, type BenchLine } from './line';

const RATE = 48_000;
const QUANTUM = 128;
/** Low enough that all 40 partials of each lie in the audible range: F2, A2, C3. */
const NOTES = [41, 45, 48] as const;

/** Three strings of a note with all 40 partials, which do not die during the measurement. */
function fullTrichord(midi: number): VoicePlan {
	const hz = 440 * 2 ** ((midi - 69) / 12);
	const plan = planVoice(
		{
			id: `${midi}`,
			piano: 'medium-grand',
			midi,
			velocity: 0.8,
			stringsF1Hz: [hz * 0.9995, hz, hz * 1.0006]
		},
		RATE
	);
	if (plan.stretch.length !== MAX_PARTIALS) throw new Error('the load must have 40 partials');
	// A held load: with the real decays partials fall silent and the measure flatters itself.
	return {
		...plan,
		ownDecay: plan.ownDecay.map(() => 0.01),
		bridgeRe: plan.bridgeRe.map((eta) => eta / 1000)
	};
}

/** Seconds of processor time per second of sound, the median of several runs. */
function share(seconds: number, runs: number, run: (quanta: number) => void): number {
	const quanta = Math.round((seconds * RATE) / QUANTUM);
	const shares = Array.from({ length: runs }, () => {
		const start = process.cpuUsage();
		run(quanta);
		const used = process.cpuUsage(start);
		return (used.user + used.system) / 1e6 / seconds;
	});
	return quantile(shares, 0.5);
}

function bankShare(seconds: number, runs: number): number {
	const bank = new ToneBank(RATE, NOTES.length);
	NOTES.forEach((midi, slot) => bank.strike(slot, fullTrichord(midi)));
	const out = new Float32Array(QUANTUM);
	const run = (quanta: number) => {
		for (let q = 0; q < quanta; q += 1) bank.process(out);
	};
	run(400);
	const load = share(seconds, runs, run);
	if (bank.soundingPartials !== NOTES.length * MAX_PARTIALS)
		throw new Error('partials fell silent');
	return load;
}

/** The same number of sinusoids by the language's own sine, undamped and uncoupled. */
function sineShare(seconds: number, runs: number): number {
	const count = NOTES.length * 3 * MAX_PARTIALS;
	const step = Float64Array.from({ length: count }, (_, k) => 0.01 + 0.001 * k);
	const phase = new Float64Array(count);
	const out = new Float32Array(QUANTUM);
	const run = (quanta: number) => {
		for (let q = 0; q < quanta; q += 1) {
			out.fill(0);
			for (let k = 0; k < count; k += 1) {
				let p = phase[k];
				for (let t = 0; t < QUANTUM; t += 1) {
					out[t] += Math.sin(p);
					p += step[k];
				}
				phase[k] = p % (2 * Math.PI);
			}
		}
	};
	run(20);
	return share(seconds, runs, run);
}

/** Time of each render quantum with strikes and retunes going on, ms. */
function quantumTimes(quanta: number): number[] {
	const bank = new ToneBank(RATE, NOTES.length);
	const plans = NOTES.map(fullTrichord);
	const out = new Float32Array(QUANTUM);
	return Array.from({ length: quanta }, (_, q) => {
		const start = performance.now();
		if (q % 200 === 0) plans.forEach((plan, slot) => bank.strike(slot, plan));
		if (q % 20 === 7) bank.retune(q % 3, 1, plans[q % 3].stringF1Hz[1] * (1 + 0.0001 * (q % 9)));
		bank.process(out);
		return performance.now() - start;
	});
}

/**
 * Longest render quantum as a share of its time. The same sequence is run several times and each
 * quantum counts with its quickest, which leaves out what other programs took.
 */
function worstQuantumShare(quanta: number, runs: number): number {
	quantumTimes(quanta);
	const passes = Array.from({ length: runs }, () => quantumTimes(quanta));
	const quickest = passes[0].map((_, q) => Math.min(...passes.map((pass) => pass[q])));
	return Math.max(...quickest) / 1000 / (QUANTUM / RATE);
}

/** Lines of the sound kernel: load of three sounding trichords of 40 partials at 48 kHz. */
export async function lines(quick: boolean): Promise<BenchLine[]> {
	const seconds = quick ? 2 : 8;
	const runs = quick ? 3 : 7;
	const load = bankShare(seconds, runs);
	const sines = sineShare(seconds / 2, 3);
	return [
		benchLine('audio kernel, three trichords × 40 partials at 48 kHz', 100 * load, '% of a core', {
			bar: 15,
			reference: { name: '360 plain Math.sin oscillators', value: 100 * sines }
		}),
		benchLine(
			'audio kernel, longest render quantum with strikes and retuning',
			100 * worstQuantumShare(2000, runs),
			'% of a quantum',
			{ bar: 100 }
		)
	];
}
