import type { DeviceFacts } from '../drills/types';

export interface DeviceSources {
	readonly sampleRateHz: number;
	readonly outputLatencySeconds: number | undefined;
	readonly userAgent: string;
	/** Whether the main pointer is a finger. */
	readonly coarsePointer: boolean;
}

/** Kind of machine and browser family; the header itself says more than a drill needs to know. */
export function userAgentClass(userAgent: string, coarsePointer: boolean): string {
	return `${coarsePointer ? 'touch' : 'desktop'}-${browserFamily(userAgent)}`;
}

function browserFamily(userAgent: string): string {
	if (/Firefox\/|FxiOS\//.test(userAgent)) return 'gecko';
	// Every browser of that system is built on the same engine, whatever it calls itself.
	if (/iPhone|iPad|iPod/.test(userAgent)) return 'webkit';
	if (/Chrome\/|Chromium\//.test(userAgent)) return 'chromium';
	if (/AppleWebKit\//.test(userAgent)) return 'webkit';
	return 'other';
}

/** What is kept with an attempt about the machine it was made on. */
export function deviceFacts(sources: DeviceSources): DeviceFacts {
	const latency = sources.outputLatencySeconds;
	const known = latency !== undefined && Number.isFinite(latency) && latency >= 0 && latency <= 10;
	return {
		sampleRateHz: sources.sampleRateHz,
		outputLatencySeconds: known ? latency : null,
		userAgentClass: userAgentClass(sources.userAgent, sources.coarsePointer)
	};
}
