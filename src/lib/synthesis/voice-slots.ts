/** Which voice of the bank plays which named voice; the longest unused one is given away first. */
export class VoiceSlots {
	private readonly names: (string | null)[];
	private readonly lastUse: number[];
	private uses = 0;

	constructor(count: number) {
		this.names = Array.from({ length: count }, () => null);
		this.lastUse = Array.from({ length: count }, () => 0);
	}

	/** Slot of a name that has one, or −1. */
	find(name: string): number {
		return this.names.indexOf(name);
	}

	/** Slot for striking a name: its own, a free one, or the longest unused. */
	take(name: string): number {
		let slot = this.find(name);
		if (slot < 0) slot = this.names.indexOf(null);
		if (slot < 0) slot = this.lastUse.indexOf(Math.min(...this.lastUse));
		this.names[slot] = name;
		this.uses += 1;
		this.lastUse[slot] = this.uses;
		return slot;
	}
}
