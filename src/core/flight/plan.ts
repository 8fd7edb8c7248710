/**
 * A plan: the geometry slot → slot of every drone as polynomials in a path parameter s in [0, 1], and one time law
 * s(t). No clock time and no drone number in it, so transitions are independent, composed by permutation, cached and
 * planned in parallel.
 */

/** s over time: pieces of polynomials in seconds from departure, at the plan's shortest duration. */
export interface TimeLaw {
	readonly kind: "s-curve" | "minimum-jerk";
	/** Seconds: P+1 rising borders from 0 to the shortest duration. */
	readonly borders: Float64Array;
	/** P × 6 coefficients, lowest power first, of piece p in (t − borders[p]). */
	readonly coefficients: Float64Array;
}

/** Dual feasibility over all pairs: the proof that an assignment is the cheapest. */
export interface AssignmentCertificate {
	readonly optimal: boolean;
	/** Sum of squared distances and the dual bound on it, mm² in the scaled measure. */
	readonly cost: number;
	readonly bound: number;
	/** Share over the bottleneck bound that flights were held to; null where uncapped. */
	readonly cap: number | null;
}

export interface Plan {
	/** Rises whenever the same problem would give another plan. */
	readonly version: number;
	/** N entries: end slot of the drone that starts in slot i. */
	readonly target: Int32Array;
	/** Degree of the paths in s. */
	readonly degree: number;
	/**
	 * N × 3 × (degree + 1) coefficients in metres, lowest power first: x, y, z of the drone that starts in slot i.
	 */
	readonly paths: Float64Array;
	readonly law: TimeLaw;
	/** Seconds: the shortest duration within all limits; longer ones dilate the law uniformly. */
	readonly shortest: number;
	/** Seconds: no plan at all can be shorter (straight flight of the drone that must fly longest). */
	readonly straightLineBound: number;
	readonly certificate: AssignmentCertificate;
	/** How the paths came about: straight, yawed, bent, guaranteed. */
	readonly method: string;
}

/** What the proof found over a whole flight; peaks and gaps are bounds that hold at every instant. */
export interface Proof {
	/** m/s, m/s², m/s³ in the duration that was proven. */
	readonly peak: {
		readonly horizontal: number;
		readonly climb: number;
		readonly descent: number;
		readonly acceleration: number;
		readonly jerk: number;
	};
	/** Smallest distance in the measure of spacing, m; seconds from departure; the two start slots. Null with one drone. */
	readonly gap: { readonly distance: number; readonly time: number; readonly drones: readonly [number, number] } | null;
	readonly verdicts: readonly Verdict[];
	/** How separation was proven. */
	readonly separation: string;
}

export type Verdict = "flies" | "tight" | "too-fast" | "too-close" | "out-of-venue";
