/** Hears what a page plays, by a meter beside the loudspeaker. */
import { expect, type Page } from '@playwright/test';

type Listening = typeof globalThis & { loudness?: () => number };

/** Runs in the page before anything else: whatever goes to the loudspeaker also goes to a meter. */
export function tapLoudspeaker(): void {
	const meters = new Map<BaseAudioContext, AnalyserNode>();
	const connect = AudioNode.prototype.connect as (...args: unknown[]) => unknown;
	AudioNode.prototype.connect = function (this: AudioNode, ...args: unknown[]) {
		const { context } = this;
		if (args[0] === context.destination) {
			let meter = meters.get(context);
			if (!meter) {
				meter = context.createAnalyser();
				meter.fftSize = 8192;
				meters.set(context, meter);
			}
			connect.call(this, meter);
		}
		return connect.apply(this, args);
	} as typeof AudioNode.prototype.connect;
	(globalThis as Listening).loudness = () =>
		Math.max(
			0,
			...[...meters.values()].map((meter) => {
				const samples = new Float32Array(meter.fftSize);
				meter.getFloatTimeDomainData(samples);
				return Math.sqrt(samples.reduce((sum, x) => sum + x * x, 0) / samples.length);
			})
		);
}

/** Root mean square of what the page plays now; 1 is full scale. */
export const loudness = (page: Page) =>
	page.evaluate(() => (globalThis as Listening).loudness?.() ?? 0);

/** A tone is heard soon. -60 dB is far above silence and far below the softest blow. */
export async function expectSound(page: Page): Promise<void> {
	await expect.poll(() => loudness(page), { message: 'a tone sounds' }).toBeGreaterThan(0.001);
}
