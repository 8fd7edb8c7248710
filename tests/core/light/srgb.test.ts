import { describe, expect, it } from "vitest";
import { linearOf, luminanceOf, toCoded, toLinear } from "../../../src/core/light/index.ts";
import { createEncoder } from "../../../src/core/light/srgb.ts";

// IEC 61966-2-1:1999, §5.2: C = 12.92 L up to L = 0.0031308, above it 1.055 L^(1/2.4) − 0.055. The figures for single
// bytes are those of the standard's equations worked to six digits.
describe("the sRGB transfer function", () => {
	it.each([
		[0, 0],
		[10, 0.003035],
		[11, 0.003347],
		[64, 0.051269],
		[128, 0.215861],
		[188, 0.502886],
		[255, 1],
	])("takes byte %i to linear light %f", (byte, linear) => {
		expect(toLinear(byte / 255)).toBeCloseTo(linear, 5);
	});

	it("goes there and back for every byte, and meets itself at the threshold", () => {
		const encode = createEncoder();
		for (let byte = 0; byte < 256; byte++) {
			expect(Math.round(255 * toCoded(toLinear(byte / 255)))).toBe(byte);
			expect(encode(toLinear(byte / 255))).toBe(byte);
		}
		expect(Math.abs(toLinear(0.04045) - toLinear(0.04045 + 1e-12))).toBeLessThan(1e-7);
	});

	it("encodes to the nearest byte everywhere, and clamps", () => {
		const encode = createEncoder();
		for (let i = 0; i <= 5000; i++) expect(encode(i / 5000)).toBe(Math.round(255 * toCoded(i / 5000)));
		expect([encode(-1), encode(Number.NaN), encode(7)]).toEqual([0, 0, 255]);
	});

	it("weighs luminance as ITU-R BT.709 does", () => {
		expect(luminanceOf(1, 1, 1)).toBeCloseTo(1, 12);
		expect(luminanceOf(...linearOf("#00ff00"))).toBeCloseTo(0.7152, 12);
	});
});
