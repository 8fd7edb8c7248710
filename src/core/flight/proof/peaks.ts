/**
 * Peaks of speed by direction, acceleration and jerk of what is flown, over the whole fleet and every instant. On each
 * piece of the time law the path is a polynomial in time; its derivatives in Bernstein form enclose their values, and a
 * norm is convex, so the largest control vector bounds it. Cells are halved until bound and value agree.
 */
import { bernsteinMatrix, halve } from "../../maths/index.ts";
import type { TimeLaw } from "../plan.ts";

export interface Peaks {
	/** m/s, m/s², m/s³; each is reached to within 1e-7 of itself and nowhere exceeded by more. */
	readonly horizontal: number;
	readonly climb: number;
	readonly descent: number;
	readonly acceleration: number;
	readonly jerk: number;
}

const NARROW = 1e-7;
const LAW_WIDTH = 6;
/** Kinds of bound, and the derivative that each is of. */
const ORDER_OF = [1, 1, 1, 2, 3];

/** Derivatives by time of sᵏ on one cell: for k = 0…degree, Bernstein coefficients of order 1, 2, 3. */
interface Cell {
	readonly degrees: readonly number[];
	/** For each order 1..3: (degree + 1) × (degrees[order] + 1). */
	readonly tables: readonly Float64Array[];
}

/** @param paths N × 3 × (degree + 1) power coefficients, m */
export function peaksOfFlight(paths: Float64Array, degree: number, count: number, law: TimeLaw): Peaks {
	const cells = cellsOf(law, degree);
	const found = new Float64Array(5);
	const width = degree + 1;
	let longest = 0;
	for (const cell of cells) longest = Math.max(longest, cell.degrees[0] + 1);
	const control = new Float64Array(3 * longest);
	for (let pass = 0; pass < 2; pass++) {
		// First what the ends of the cells reach, which settles most; then what the hulls leave open.
		for (let i = 0; i < count; i++) {
			for (const cell of cells) {
				for (let order = 1; order <= 3; order++) {
					const length = cell.degrees[order - 1] + 1;
					const table = cell.tables[order - 1];
					const step = pass === 0 ? Math.max(1, length - 1) : 1;
					for (let axis = 0; axis < 3; axis++) {
						const start = (3 * i + axis) * width;
						for (let m = 0; m < length; m += step) {
							let value = 0;
							for (let k = 1; k <= degree; k++) value += paths[start + k] * table[k * length + m];
							control[axis * length + m] = value;
						}
					}
					for (let kind = 0; kind < 5; kind++) {
						if (ORDER_OF[kind] !== order) continue;
						if (pass === 0) {
							found[kind] = Math.max(
								found[kind],
								sizeAt(kind, control, length, 0),
								sizeAt(kind, control, length, length - 1),
							);
						} else if (hull(kind, control, length) > found[kind] * (1 + NARROW) + 1e-12) {
							refine(kind, control.slice(0, 3 * length), length, found);
						}
					}
				}
			}
		}
	}
	return { horizontal: found[0], climb: found[1], descent: found[2], acceleration: found[3], jerk: found[4] };
}

/** What a kind of bound measures, of control vector m. */
function sizeAt(kind: number, control: Float64Array, length: number, m: number): number {
	const x = control[m];
	const y = control[length + m];
	const z = control[2 * length + m];
	if (kind === 0) return Math.sqrt(x * x + y * y);
	if (kind === 1) return z;
	if (kind === 2) return -z;
	return Math.sqrt(x * x + y * y + z * z);
}

function hull(kind: number, control: Float64Array, length: number): number {
	let most = -Infinity;
	for (let m = 0; m < length; m++) most = Math.max(most, sizeAt(kind, control, length, m));
	return most;
}

/** Halves a cell until no part of it can exceed what has been found. */
function refine(kind: number, control: Float64Array, length: number, found: Float64Array): void {
	const stack = [control];
	let guard = 0;
	while (stack.length > 0) {
		const part = stack.pop();
		if (part === undefined) break;
		found[kind] = Math.max(found[kind], sizeAt(kind, part, length, 0), sizeAt(kind, part, length, length - 1));
		const bound = hull(kind, part, length);
		if (bound <= found[kind] * (1 + NARROW) + 1e-12) continue;
		// Far beyond what halving needs in float64: take the bound itself, which is safe.
		if (++guard > 4000) {
			found[kind] = bound;
			continue;
		}
		const left = new Float64Array(3 * length);
		const right = new Float64Array(3 * length);
		for (let axis = 0; axis < 3; axis++) halve(part, axis * length, length - 1, left, right, axis * length);
		stack.push(right, left);
	}
}

function cellsOf(law: TimeLaw, degree: number): Cell[] {
	const cells: Cell[] = [];
	const parts = degree === 1 ? 1 : 4;
	for (let p = 0; p + 1 < law.borders.length; p++) {
		const span = law.borders[p + 1] - law.borders[p];
		if (span <= 0) continue;
		const piece = law.coefficients.subarray(p * LAW_WIDTH, (p + 1) * LAW_WIDTH);
		for (let part = 0; part < parts; part++) {
			cells.push(cellOf(shifted(piece, (span * part) / parts), span / parts, degree));
		}
	}
	return cells;
}

/** Power coefficients of a polynomial in t about another origin, trailing zeros dropped. */
function shifted(piece: Float64Array, by: number): number[] {
	let top = LAW_WIDTH - 1;
	while (top > 0 && piece[top] === 0) top--;
	const moved = Array.from(piece.subarray(0, top + 1));
	for (let level = 0; level < top; level++) for (let k = top - 1; k >= level; k--) moved[k] += by * moved[k + 1];
	return moved;
}

function cellOf(law: number[], span: number, degree: number): Cell {
	const top = law.length - 1;
	const full = Math.max(1, top * degree);
	const degrees = [1, 2, 3].map((order) => Math.max(0, full - order));
	const tables = degrees.map((d) => new Float64Array((degree + 1) * (d + 1)));
	const matrices = degrees.map((d) => bernsteinMatrix(d, 0, span));
	let power: number[] = [1];
	for (let k = 1; k <= degree; k++) {
		power = multiply(power, law);
		let derivative = power;
		for (let order = 1; order <= 3; order++) {
			derivative = derive(derivative);
			const d = degrees[order - 1];
			for (let row = 0; row <= d; row++) {
				let value = 0;
				for (let m = 0; m <= d && m < derivative.length; m++)
					value += matrices[order - 1][row * (d + 1) + m] * derivative[m];
				tables[order - 1][k * (d + 1) + row] = value;
			}
		}
	}
	return { degrees, tables };
}

function multiply(a: readonly number[], b: readonly number[]): number[] {
	const product = new Array<number>(a.length + b.length - 1).fill(0);
	for (let i = 0; i < a.length; i++) for (let j = 0; j < b.length; j++) product[i + j] += a[i] * b[j];
	return product;
}

function derive(a: readonly number[]): number[] {
	if (a.length <= 1) return [0];
	return a.slice(1).map((value, k) => value * (k + 1));
}
