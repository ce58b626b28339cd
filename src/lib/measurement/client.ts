import type { Analysis } from './analysis';
import type { AnalysisReply, AnalysisRequest } from './analysis.worker';
import { AnalysisFailedError } from './client-error';
import { AudioRefusedError } from './formats/audio-refused';
import type { StrikeClip } from './strike-recorder';
import type { MeasureOptions } from './types';

export { AnalysisFailedError } from './client-error';
export type { Analysis, PairShore } from './analysis';

/** Measures in a thread of its own, so that the page stays answering. */
export interface AnalysisClient {
	/** Measures a recorded strike; its samples are copied, so the caller may keep them. */
	analyseClip(clip: StrikeClip, options: MeasureOptions): Promise<Analysis>;
	/** @throws AudioRefusedError when the file is not accepted */
	analyseFile(bytes: Uint8Array<ArrayBuffer>, options: MeasureOptions): Promise<Analysis>;
	close(): void;
}

/** A healthy measurement takes a second or two; this long means that it hangs. */
const TIMEOUT_MS = 60_000;

type WithoutId<T> = T extends unknown ? Omit<T, 'id'> : never;

interface Pending {
	resolve(analysis: Analysis): void;
	reject(error: Error): void;
	timer: ReturnType<typeof setTimeout>;
}

function settle(pending: Pending, reply: AnalysisReply): void {
	clearTimeout(pending.timer);
	if ('analysis' in reply) pending.resolve(reply.analysis);
	else if ('refusal' in reply) pending.reject(new AudioRefusedError(reply.refusal, reply.message));
	else pending.reject(new AnalysisFailedError());
}

/** @param makeWorker for tests; the browser's module worker by default */
export function createAnalysisClient(
	makeWorker: () => Worker = () =>
		new Worker(new URL('./analysis.worker.ts', import.meta.url), { type: 'module' })
): AnalysisClient {
	const waiting = new Map<number, Pending>();
	let worker: Worker | null = null;
	let nextId = 1;

	const stop = (error: AnalysisFailedError) => {
		worker?.terminate();
		worker = null;
		for (const pending of waiting.values()) {
			clearTimeout(pending.timer);
			pending.reject(error);
		}
		waiting.clear();
	};
	const start = (): Worker => {
		const made = makeWorker();
		made.onmessage = ({ data }: MessageEvent<AnalysisReply>) => {
			const pending = waiting.get(data.id);
			if (!pending) return;
			waiting.delete(data.id);
			settle(pending, data);
		};
		made.onerror = () => stop(new AnalysisFailedError());
		return made;
	};
	const ask = (request: WithoutId<AnalysisRequest>, transfer: Transferable[]) =>
		new Promise<Analysis>((resolve, reject) => {
			worker ??= start();
			const id = nextId++;
			const timer = setTimeout(() => stop(new AnalysisFailedError()), TIMEOUT_MS);
			waiting.set(id, { resolve, reject, timer });
			worker.postMessage({ ...request, id }, transfer);
		});

	return {
		analyseClip({ samples, sampleRateHz, strikeSample }, options) {
			const copy = samples.slice();
			return ask({ samples: copy, sampleRateHz, strikeSample, options }, [copy.buffer]);
		},
		analyseFile: (bytes, options) => ask({ bytes, options }, [bytes.buffer]),
		close: () => stop(new AnalysisFailedError('The measurement was stopped.'))
	};
}
