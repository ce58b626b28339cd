import type { Hertz } from './units';

/**
 * E/ρ of piano wire in m²/s²: 25.5e10 (cm/s)², R. W. Young, "Inharmonicity of plain wire piano
 * strings", J. Acoust. Soc. Am. 24(3), 1952, abstract. With ρ = 7850 kg/m³ this is E = 200.2 GPa.
 */
export const STEEL_STIFFNESS_PER_DENSITY = 25.5e6;
/** Density of piano wire in kg/m³ (7850 reproduces published string tensions best). */
export const STEEL_DENSITY = 7850;

/** A plain steel wire between its two ends. SI units. */
export interface PlainWire {
	/** Speaking length, m. */
	lengthM: number;
	/** Wire diameter, m. */
	diameterM: number;
	/** kg/m³; default {@link STEEL_DENSITY}. */
	densityKgPerM3?: number;
	/** Young's modulus, Pa; default {@link STEEL_STIFFNESS_PER_DENSITY} × density. */
	youngModulusPa?: number;
}

/**
 * Frequency of partial n: n·f0·sqrt(1 + B·n²).
 * Fletcher 1964, "Normal vibration frequencies of a stiff piano string", J. Acoust. Soc. Am. 36:203.
 * @param n partial number, 1 upwards
 * @param f0Hz fundamental of the same string without stiffness
 * @param inharmonicity B, dimensionless, 0 upwards
 */
export function partialHz(n: number, f0Hz: Hertz, inharmonicity: number): Hertz {
	return n * f0Hz * Math.sqrt(1 + inharmonicity * n * n);
}

/** The flexible string's fundamental f0 from the sounding first partial: f1 / sqrt(1 + B). */
export function flexibleFundamentalHz(f1Hz: Hertz, inharmonicity: number): Hertz {
	return f1Hz / Math.sqrt(1 + inharmonicity);
}

/** Frequency of partial n from the sounding first partial f1 and B. Partial 1 is f1 exactly. */
export function partialHzFromF1(n: number, f1Hz: Hertz, inharmonicity: number): Hertz {
	return n * f1Hz * Math.sqrt((1 + inharmonicity * n * n) / (1 + inharmonicity));
}

/** f1 of the string whose partial n lies at `frequencyHz`: the inverse of {@link partialHzFromF1}. */
export function f1HzFromPartial(n: number, frequencyHz: Hertz, inharmonicity: number): Hertz {
	return frequencyHz / partialHzFromF1(n, 1, inharmonicity);
}

/**
 * Cents by which partial n is sharp of n·f1: 600·log2((1 + B·n²)/(1 + B)).
 * @returns 0 for n = 1 or B = 0
 */
export function partialStretchCents(n: number, inharmonicity: number): number {
	return 600 * Math.log2((1 + inharmonicity * n * n) / (1 + inharmonicity));
}

/**
 * B that puts partial n at `ratio` × n times the reference fundamental, the inverse of Fletcher's
 * formula (Schuck & Young 1943 state such a ratio: 15th partial at the 16th harmonic).
 * @param reference 'f0' (flexible fundamental) or 'f1' (sounding first partial)
 * @returns NaN when the reference is 'f1' and no B reaches the ratio (ratio ≥ n)
 */
export function inharmonicityFromStretch(
	n: number,
	ratio: number,
	reference: 'f0' | 'f1' = 'f0'
): number {
	const square = ratio * ratio;
	if (reference === 'f0') return (square - 1) / (n * n);
	return square < n * n ? (square - 1) / (n * n - square) : Number.NaN;
}

/**
 * Tension of a plain wire that sounds at `f0Hz`: T = π·ρ·d²·L²·f², newtons
 * (Mersenne and Taylor: f = sqrt(T/μ)/(2L), μ = π·ρ·d²/4).
 */
export function tensionOfPlainWire(wire: PlainWire & { f0Hz: Hertz }): number {
	const density = wire.densityKgPerM3 ?? STEEL_DENSITY;
	return Math.PI * density * (wire.diameterM * wire.lengthM * wire.f0Hz) ** 2;
}

/**
 * Inharmonicity of a plain wire: B = π³·E·d⁴/(64·T·L²) (Fletcher 1964), the tension given or
 * taken from the pitch. Not for wound strings: those need a measured or modelled B.
 */
export function inharmonicityOfPlainWire(
	wire: PlainWire & ({ tensionN: number } | { f0Hz: Hertz })
): number {
	const density = wire.densityKgPerM3 ?? STEEL_DENSITY;
	const modulus = wire.youngModulusPa ?? STEEL_STIFFNESS_PER_DENSITY * density;
	const tension = 'tensionN' in wire ? wire.tensionN : tensionOfPlainWire(wire);
	return (
		(Math.PI ** 3 * modulus * wire.diameterM ** 4) / (64 * tension * wire.lengthM * wire.lengthM)
	);
}
