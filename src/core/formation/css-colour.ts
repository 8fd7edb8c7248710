import { COLOUR_NAMES } from "./colour-names-data.ts";

/**
 * A CSS colour as #rrggbb (CSS Color 4): hexadecimal, rgb(), hsl() and the named colours; opacity is left off.
 * @returns null for anything else: none, url(…), currentColor
 */
export function readCssColour(text: string): string | null {
	const value = text.trim().toLowerCase();
	const named = COLOUR_NAMES[value];
	if (named !== undefined) return `#${named}`;
	const hex = /^#([0-9a-f]{3,8})$/.exec(value)?.[1];
	if (hex !== undefined) {
		if (hex.length === 6 || hex.length === 8) return `#${hex.slice(0, 6)}`;
		if (hex.length === 3 || hex.length === 4) return `#${[...hex.slice(0, 3)].map((digit) => digit + digit).join("")}`;
		return null;
	}
	const call = /^(rgb|hsl)a?\(([^)]*)\)$/.exec(value);
	if (call === null) return null;
	const parts = call[2].split(/[\s,/]+/).filter((part) => part !== "");
	const numbers = parts.slice(0, 3).map((part) => Number.parseFloat(part));
	if (numbers.length < 3 || !numbers.every(Number.isFinite)) return null;
	if (call[1] === "hsl") return hslToHex(numbers[0], numbers[1] / 100, numbers[2] / 100);
	return toHex(numbers.map((number, i) => (parts[i].endsWith("%") ? (number * 255) / 100 : number)));
}

function toHex(bytes: readonly number[]): string {
	const digits = bytes.map((byte) =>
		Math.min(255, Math.max(0, Math.round(byte)))
			.toString(16)
			.padStart(2, "0"),
	);
	return `#${digits.join("")}`;
}

/** CSS Color 4, §7: hue in degrees, saturation and lightness as shares. */
function hslToHex(hue: number, saturation: number, lightness: number): string {
	const reach = saturation * Math.min(lightness, 1 - lightness);
	const channel = (n: number): number => {
		const k = (((n + hue / 30) % 12) + 12) % 12;
		return 255 * (lightness - reach * Math.max(-1, Math.min(k - 3, 9 - k, 1)));
	};
	return toHex([channel(0), channel(8), channel(4)]);
}
