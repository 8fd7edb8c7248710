import { strToU8 } from "fflate";
import { sha256Hex } from "../maths/index.ts";
import { type Show, writeShow } from "../show/index.ts";

/** Crockford's base 32: no I, L, O or U, so that a code can be read out over the radio. */
const ALPHABET = "0123456789ABCDEFGHJKMNPQRSTVWXYZ";

/**
 * The short code that ties every page and file of a hand-off together: the first 40 bits of SHA-256 over the show as it
 * is written, which holds the soundtrack's own hash.
 * @returns eight letters and digits in two groups, "7K3Q-91XB"
 */
export function revisionCode(show: Show): string {
	const hash = sha256Hex(strToU8(writeShow(show)));
	let bits = BigInt(`0x${hash.slice(0, 10)}`);
	let code = "";
	for (let i = 0; i < 8; i++) {
		code = ALPHABET[Number(bits % 32n)] + code;
		bits /= 32n;
	}
	return `${code.slice(0, 4)}-${code.slice(4)}`;
}
