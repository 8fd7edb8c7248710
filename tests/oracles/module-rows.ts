/**
 * The times of a ProTracker module's rows, read from its patterns: what a player plays when. Imports nothing of src.
 *
 * Format: 31 samples, "M.K." and its like at byte 1080, orders at 952, patterns of 64 rows of four bytes a channel from
 * 1084 (L. Hamilton and L. Zap, ProTracker 2.3A documentation, 1991). Effects that move time: B (jump), D (break),
 * F (speed below 32, else tempo), E6 (loop), EE (delay). A row lasts speed ticks of 2.5 / tempo seconds.
 */
const CHANNELS: Record<string, number> = { "M.K.": 4, "M!K!": 4, FLT4: 4, "4CHN": 4, "6CHN": 6, "8CHN": 8 };

export interface ModuleRow {
	/** Seconds from the module's start. */
	readonly time: number;
	/** Row within its pattern, from 0. */
	readonly row: number;
}

/** Rows in the order they are played, until a place is played again or the orders end. */
export function readModuleRows(bytes: Uint8Array): ModuleRow[] {
	const text = String.fromCharCode(...bytes.subarray(1080, 1084));
	const channels = CHANNELS[text];
	if (!channels) throw new Error(`not a ProTracker module: ${text}`);
	const length = bytes[950];
	const orders = bytes.subarray(952, 952 + length);
	const rows: ModuleRow[] = [];
	const seen = new Set<number>();
	const loopStart = new Array<number>(channels).fill(0);
	const loopLeft = new Array<number>(channels).fill(0);
	let [order, row, time, speed, tempo] = [0, 0, 0, 6, 125];
	while (order < length) {
		const place = order * 64 + row;
		if (seen.has(place)) break;
		seen.add(place);
		let [nextOrder, nextRow, delay] = [order, row + 1, 0];
		let jumped = false;
		for (let c = 0; c < channels; c++) {
			const at = 1084 + ((orders[order] * 64 + row) * channels + c) * 4;
			const effect = bytes[at + 2] & 15;
			const value = bytes[at + 3];
			if (effect === 0xf && value > 0) {
				if (value < 32) speed = value;
				else tempo = value;
			}
			if (effect === 0xb) [nextOrder, nextRow, jumped] = [value, jumped ? nextRow : 0, true];
			if (effect === 0xd) {
				nextOrder = jumped ? nextOrder : order + 1;
				[nextRow, jumped] = [(value >> 4) * 10 + (value & 15), true];
			}
			if (effect === 0xe && value >> 4 === 0xe) delay = value & 15;
			if (effect !== 0xe || value >> 4 !== 6) continue;
			const times = value & 15;
			if (times === 0) {
				loopStart[c] = row;
			} else if (loopLeft[c] === 0 || loopLeft[c] > 1) {
				loopLeft[c] = loopLeft[c] === 0 ? times : loopLeft[c] - 1;
				[nextRow, nextOrder] = [loopStart[c], order];
				// these rows are played again on purpose
				for (let r = nextRow; r <= row; r++) seen.delete(order * 64 + r);
			} else {
				loopLeft[c] = 0;
			}
		}
		rows.push({ time, row });
		time += (speed * (1 + delay) * 2.5) / tempo;
		if (nextRow >= 64) {
			nextRow = 0;
			if (!jumped) nextOrder = order + 1;
			loopStart.fill(0);
		}
		order = nextOrder;
		row = nextRow;
	}
	return rows;
}

/** Every fourth row of a pattern is a beat: the way trackers are written, with speed 6 at their nominal tempo. */
export function beatsOfModule(bytes: Uint8Array): number[] {
	return readModuleRows(bytes)
		.filter(({ row }) => row % 4 === 0)
		.map(({ time }) => time);
}
