import { analyseFile, analyseSamples, type Analysis } from './analysis';
import { AudioRefusedError, type AudioRefusal } from './decode';
import type { MeasureOptions } from './types';

/** What the page asks; buffers are transferred. */
export type AnalysisRequest = { id: number; options: MeasureOptions } & (
	{ samples: Float32Array; sampleRateHz: number; strikeSample: number } | { bytes: Uint8Array }
);

export type AnalysisReply =
	| { id: number; analysis: Analysis }
	| { id: number; refusal: AudioRefusal; message: string }
	| { id: number; failure: string };

async function answer(request: AnalysisRequest): Promise<AnalysisReply> {
	const { id, options } = request;
	try {
		const analysis =
			'bytes' in request
				? await analyseFile(request.bytes, options)
				: analyseSamples(request.samples, request.sampleRateHz, options, request.strikeSample);
		return { id, analysis };
	} catch (error) {
		if (error instanceof AudioRefusedError) {
			return { id, refusal: error.refusal, message: error.message };
		}
		return { id, failure: error instanceof Error ? error.message : String(error) };
	}
}

addEventListener('message', (event: MessageEvent<AnalysisRequest>) => {
	void answer(event.data).then((reply) => postMessage(reply));
});
