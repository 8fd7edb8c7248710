import { createHash } from "node:crypto";
import { describe, expect, it } from "vitest";
import { createSha256, sha256Hex } from "../../../src/core/maths/sha256.ts";

const bytes = (text: string): Uint8Array => new TextEncoder().encode(text);

describe("SHA-256", () => {
	// NIST, "Cryptographic Standards and Guidelines: Examples with Intermediate Values", SHA-256 of FIPS 180-4.
	it("agrees with the examples published for FIPS 180-4", () => {
		expect(sha256Hex(bytes("abc"))).toBe("ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
		expect(sha256Hex(bytes("abcdbcdecdefdefgefghfghighijhijkijkljklmklmnlmnomnopnopq"))).toBe(
			"248d6a61d20638b8e5c026930c3e6039a33ce45964ff2167f6ecedd419db06c1",
		);
		expect(sha256Hex(new Uint8Array(0))).toBe("e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855");
		expect(sha256Hex(new Uint8Array(1_000_000).fill(0x61))).toBe(
			"cdc76e5c9914fb9281a1c7e284d73e67f1809a48a497200e046d39ccc7112cd0",
		);
	});

	it("agrees with Node's OpenSSL at every length around the block's borders", () => {
		for (let length = 0; length < 200; length++) {
			const data = Uint8Array.from({ length }, (_, i) => (i * 131 + length) & 255);
			expect(sha256Hex(data)).toBe(createHash("sha256").update(data).digest("hex"));
		}
	});

	it("gives the same digest however the bytes are cut", () => {
		const data = Uint8Array.from({ length: 1000 }, (_, i) => (i * i) & 255);
		for (const step of [1, 3, 63, 64, 65, 400]) {
			const digest = createSha256();
			for (let at = 0; at < data.length; at += step) digest.update(data.subarray(at, at + step));
			expect(digest.hex()).toBe(sha256Hex(data));
		}
	});

	it("refuses more bytes once it has been read", () => {
		const digest = createSha256();
		digest.hex();
		expect(() => digest.update(new Uint8Array(1))).toThrow(/start a new one/);
	});
});
