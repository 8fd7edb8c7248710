import { describe, expect, it } from "vitest";
import { createPlainMultiplier, createVectorMultiplier } from "../../../../src/core/music/network/multiply.ts";

describe("multiplication of rows by weights", () => {
	const [rows, size, outputs] = [12, 37, 24];
	const x = 0;
	const weight = rows * size;
	const bias = weight + size * outputs;
	const out = bias + outputs;
	const numbers = Float32Array.from({ length: out }, (_, i) => Math.sin(i * i * 0.37) * 3);

	it("gives the sums that doubles give, to single precision", () => {
		const { arena, multiply } = createPlainMultiplier(out + rows * outputs);
		arena.set(numbers);
		multiply(x, weight, bias, out, rows, size, outputs);
		for (let row = 0; row < rows; row++) {
			for (let o = 0; o < outputs; o++) {
				let sum = numbers[bias + o];
				for (let k = 0; k < size; k++) {
					sum += numbers[(row >> 2) * 4 * size + 4 * k + (row & 3)] * numbers[weight + k * outputs + o];
				}
				expect(Math.abs(arena[out + row * outputs + o] - sum)).toBeLessThan(1e-4);
			}
		}
	});

	it("gives the same bits with vectors and without", () => {
		const plain = createPlainMultiplier(out + rows * outputs);
		const vectors = createVectorMultiplier(out + rows * outputs);
		if (!vectors) throw new Error("Node 20 has WebAssembly with vectors, so the module must be at fault");
		for (const { arena, multiply } of [plain, vectors]) {
			arena.set(numbers);
			multiply(x, weight, bias, out, rows, size, outputs);
		}
		expect(vectors.arena).toEqual(plain.arena);
		expect(vectors.arena.some((v, i) => i >= out && v !== 0)).toBe(true);
	});
});
