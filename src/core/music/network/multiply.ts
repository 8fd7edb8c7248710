/**
 * The one operation that the network's time goes into: rows of inputs times a matrix of weights. As WebAssembly with
 * 128-bit vectors where the host has it (four times as fast as plain loops, which took more than half of the time of a
 * whole analysis), as plain loops elsewhere. Both round to single precision after every step and add in the same order,
 * so they give the same bits; a test holds them together.
 */

/** Rows that are worked on together, and outputs that fill two vectors. */
export const ROWS_TOGETHER = 4;
const OUTPUTS_TOGETHER = 8;

/** Single-precision numbers that a multiplier works on; all places below are indices into it. */
export interface Multiplier {
	readonly arena: Float32Array;
	/**
	 * out[row][o] = bias[o] + Σ x[row][k] · weight[k][o].
	 * @param x rows in fours: value k of row r at x + (r >> 2) · 4 · size + 4 k + (r & 3)
	 * @param weight weight[k][o] at weight + k · outputs + o
	 * @param out row r, output o at out + r · outputs + o
	 * @param rows a multiple of 4
	 * @param outputs a multiple of 8
	 */
	multiply(x: number, weight: number, bias: number, out: number, rows: number, size: number, outputs: number): void;
}

/** What is used of the WebAssembly interface; core has the types of no host. */
interface WebAssemblyHost {
	validate(bytes: Uint8Array): boolean;
	readonly Memory: new (description: { initial: number }) => { readonly buffer: ArrayBuffer };
	readonly Module: new (bytes: Uint8Array) => object;
	readonly Instance: new (module: object, imports: object) => { readonly exports: Record<string, unknown> };
}

const PAGE = 65_536;

/** @param size numbers in the arena */
export function createMultiplier(size: number): Multiplier {
	return createVectorMultiplier(size) ?? createPlainMultiplier(size);
}

/** The plain form: the same sums in the same order. */
export function createPlainMultiplier(size: number): Multiplier {
	const arena = new Float32Array(size);
	const round = Math.fround;
	const multiply = (x: number, w: number, bias: number, out: number, rows: number, size: number, outputs: number) => {
		for (let row = 0; row < rows; row += ROWS_TOGETHER) {
			const block = x + row * size;
			for (let o = 0; o < outputs; o++) {
				let a = arena[bias + o];
				let b = a;
				let c = a;
				let d = a;
				let at = block;
				for (let k = w + o; k < w + o + size * outputs; k += outputs, at += ROWS_TOGETHER) {
					const u = arena[k];
					a = round(a + round(u * arena[at]));
					b = round(b + round(u * arena[at + 1]));
					c = round(c + round(u * arena[at + 2]));
					d = round(d + round(u * arena[at + 3]));
				}
				const to = out + row * outputs + o;
				arena[to] = a;
				arena[to + outputs] = b;
				arena[to + 2 * outputs] = c;
				arena[to + 3 * outputs] = d;
			}
		}
	};
	return { arena, multiply };
}

/** @returns null where the host has no WebAssembly with vectors, or forbids it */
export function createVectorMultiplier(size: number): Multiplier | null {
	const host = (globalThis as unknown as { WebAssembly?: WebAssemblyHost }).WebAssembly;
	if (!host) return null;
	try {
		const code = assemble();
		if (!host.validate(code)) return null;
		const memory = new host.Memory({ initial: Math.ceil((size * 4) / PAGE) });
		const { exports } = new host.Instance(new host.Module(code), { m: { m: memory } });
		const run = exports.f as (...places: number[]) => void;
		return {
			arena: new Float32Array(memory.buffer, 0, size),
			multiply: (x, weight, bias, out, rows, size, outputs) =>
				run(4 * x, 4 * weight, 4 * bias, 4 * out, rows, size, outputs),
		};
	} catch {
		return null; // a page's security policy may forbid compiling
	}
}

/** Unsigned LEB128, as WebAssembly writes whole numbers. */
function whole(value: number): number[] {
	const bytes: number[] = [];
	for (let rest = value; ; rest >>>= 7) {
		if (rest < 128) return [...bytes, rest];
		bytes.push((rest & 127) | 128);
	}
}

const section = (id: number, body: number[]): number[] => [id, ...whole(body.length), ...body];

/**
 * The module, put together byte by byte (WebAssembly Core Specification 2.0, 2022, §5): imports memory m.m, exports
 * f(x, weight, bias, out, rows, size, outputs) with byte addresses.
 */
function assemble(): Uint8Array {
	const [x, weight, bias, out, rows, size, outputs, stride, at, left, from, along, place] = Array(13).keys();
	const firstVector = 13;
	const sum = (row: number, half: number): number => firstVector + 2 * row + half;
	const [low, high, splat] = [sum(4, 0), sum(4, 1), sum(5, 0)];

	const get = (local: number): number[] => [0x20, local];
	const set = (local: number): number[] => [0x21, local];
	const constant = (value: number): number[] => [0x41, ...whole(value)]; // values below 64 only: signed LEB128 agrees
	const add = [0x6a];
	const times = [0x6c];
	const vector = (opcode: number): number[] => [0xfd, ...whole(opcode)];
	const load = (offset: number): number[] => [...vector(0x00), 2, ...whole(offset)];
	const loadSplat = (offset: number): number[] => [...vector(0x09), 2, ...whole(offset)];
	const store = (offset: number): number[] => [...vector(0x0b), 2, ...whole(offset)];
	const advance = (local: number, by: number[]): number[] => [...get(local), ...by, ...add, ...set(local)];
	const loop = (body: number[], again: number[]): number[] => [0x03, 0x40, ...body, ...again, 0x0d, 0, 0x0b];
	const below = (a: number[], b: number[]): number[] => [...a, ...b, 0x49]; // i32.lt_u
	const each = <T>(count: number, make: (i: number) => T[]): T[] =>
		Array.from({ length: count }, (_, i) => make(i)).flat();

	const term = (row: number, half: number): number[] => [
		...get(sum(row, half)),
		...get(splat),
		...get(half === 0 ? low : high),
		...vector(0xe6), // f32x4.mul
		...vector(0xe4), // f32x4.add
		...set(sum(row, half)),
	];
	const overInputs = loop(
		[
			...get(along),
			...load(0),
			...set(low),
			...get(along),
			...load(16),
			...set(high),
			...each(ROWS_TOGETHER, (row) => [
				...get(from),
				...loadSplat(4 * row),
				...set(splat),
				...term(row, 0),
				...term(row, 1),
			]),
			...advance(from, constant(16)),
			...advance(along, get(stride)),
			...get(left),
			...constant(1),
			0x6b, // i32.sub
			...set(left),
		],
		get(left),
	);
	const overOutputs = loop(
		[
			...each(2, (half) => [
				...get(bias),
				...get(at),
				...add,
				...load(16 * half),
				...set(sum(0, half)),
				...each(3, (row) => [...get(sum(0, half)), ...set(sum(row + 1, half))]),
			]),
			...[...get(x), ...set(from)],
			...[...get(weight), ...get(at), ...add, ...set(along)],
			...[...get(size), ...set(left)],
			...overInputs,
			...[...get(out), ...get(at), ...add, ...set(place)],
			...each(ROWS_TOGETHER, (row) => [
				...each(2, (half) => [...get(place), ...get(sum(row, half)), ...store(16 * half)]),
				...advance(place, get(stride)),
			]),
			...advance(at, constant(4 * OUTPUTS_TOGETHER)),
		],
		below(get(at), get(stride)),
	);
	const overRows = loop(
		[
			...[...constant(0), ...set(at)],
			...overOutputs,
			...advance(x, [...get(size), ...constant(16), ...times]),
			...advance(out, [...get(stride), ...constant(ROWS_TOGETHER), ...times]),
			...[...get(rows), ...constant(ROWS_TOGETHER), 0x6b, ...set(rows)],
		],
		get(rows),
	);
	const body = [
		2, // two runs of locals: six whole numbers, eleven vectors
		...[6, 0x7f],
		...[11, 0x7b],
		...[...get(outputs), ...constant(4), ...times, ...set(stride)],
		...overRows,
		0x0b,
	];
	return Uint8Array.from([
		...[0x00, 0x61, 0x73, 0x6d, 1, 0, 0, 0],
		...section(1, [1, 0x60, 7, ...Array<number>(7).fill(0x7f), 0]),
		...section(2, [1, 1, 0x6d, 1, 0x6d, 2, 0, 0]), // m.m: memory of any size
		...section(3, [1, 0]),
		...section(7, [1, 1, 0x66, 0, 0]), // f
		...section(10, [1, ...whole(body.length), ...body]),
	]);
}
