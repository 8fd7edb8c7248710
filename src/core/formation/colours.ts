/** Colours as the show file writes them, #rrggbb, to three sRGB bytes in `out` from `at`. */
export function writeColour(colour: string, out: Uint8Array, at: number): void {
	const value = Number.parseInt(colour.slice(1), 16);
	out[at] = (value >> 16) & 255;
	out[at + 1] = (value >> 8) & 255;
	out[at + 2] = value & 255;
}

/** Three bytes a slot; a slot without a colour of its own is white. Null where none has one. */
export function packColours(colours: readonly (string | undefined)[] | undefined, count: number): Uint8Array | null {
	if (colours === undefined || !colours.some((colour) => colour !== undefined)) return null;
	const out = new Uint8Array(3 * count).fill(255);
	for (let i = 0; i < Math.min(count, colours.length); i++) {
		const colour = colours[i];
		if (colour !== undefined) writeColour(colour, out, 3 * i);
	}
	return out;
}
