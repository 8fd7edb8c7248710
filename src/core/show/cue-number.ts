/** Decimal numbers of cues, exact: "12.5" → { units: 125, digits: 1 }. */
interface Decimal {
	readonly units: bigint;
	readonly digits: number;
}

function parseDecimal(number: string): Decimal | null {
	const match = /^(\d{1,9})(?:\.(\d{1,9}))?$/.exec(number.trim());
	if (match === null) return null;
	const fraction = match[2] ?? "";
	return { units: BigInt(match[1] + fraction), digits: fraction.length };
}

function scaled(value: Decimal, digits: number): bigint {
	return value.units * 10n ** BigInt(digits - value.digits);
}

/** Written without trailing zeros. */
function write(units: bigint, digits: number): string {
	const text = units.toString().padStart(digits + 1, "0");
	const whole = text.slice(0, text.length - digits);
	const fraction = digits === 0 ? "" : text.slice(text.length - digits).replace(/0+$/, "");
	return fraction === "" ? whole : `${whole}.${fraction}`;
}

/** Order of two cue numbers: decimals by value, what is no decimal after them by its letters. */
export function compareNumbers(a: string, b: string): number {
	const x = parseDecimal(a);
	const y = parseDecimal(b);
	if (x === null || y === null) return x === y ? (a < b ? -1 : a > b ? 1 : 0) : x === null ? 1 : -1;
	const digits = Math.max(x.digits, y.digits);
	const difference = scaled(x, digits) - scaled(y, digits);
	return difference < 0n ? -1 : difference > 0n ? 1 : 0;
}

/**
 * A number for a cue that is put in: numbers that are out never change, so it lies between its neighbours' with as few
 * digits as that takes. Between 12 and 13: 12.5; between 12 and 14: 13; after 12: 13; before 1: 0.5.
 * @param before number of the cue before it in time, or null
 * @param after number of the one after it, or null
 * @param taken every number in use; a free one is found beside them
 */
export function numberBetween(before: string | null, after: string | null, taken: Iterable<string> = []): string {
	const used = new Set<string>();
	let highest = 0n;
	for (const number of taken) {
		const value = parseDecimal(number);
		used.add(value === null ? number : write(value.units, value.digits));
		if (value !== null) {
			const whole = value.units / 10n ** BigInt(value.digits);
			if (whole > highest) highest = whole;
		}
	}
	const low = before === null ? { units: 0n, digits: 0 } : parseDecimal(before);
	const high = after === null ? null : parseDecimal(after);
	if (low !== null && high !== null && compareNumbers(before ?? "0", after ?? "0") < 0) {
		const least = Math.max(low.digits, high.digits);
		for (let digits = 0; digits <= least + 9; digits++) {
			const found = nearestToMiddle(low, high, digits, Math.max(digits, least), used);
			if (found !== null) return found;
		}
	}
	if (low !== null && high === null) {
		let next = low.units / 10n ** BigInt(low.digits) + 1n;
		while (used.has(next.toString())) next++;
		return next.toString();
	}
	// Neighbours that are out of order or no numbers at all: the next whole number that nothing has.
	return (highest + 1n).toString();
}

function nearestToMiddle(
	low: Decimal,
	high: Decimal,
	digits: number,
	fine: number,
	used: ReadonlySet<string>,
): string | null {
	const step = 10n ** BigInt(fine - digits);
	const from = scaled(low, fine);
	const to = scaled(high, fine);
	let best: bigint | null = null;
	let bestDistance = 0n;
	const middle = from + to;
	// At most nine steps lie between two neighbours before a digit more is tried; a wide gap is looked at near its middle.
	const first = from / step + 1n;
	const start = middle / 2n / step - 50n;
	for (let units = start > first ? start : first, tried = 0; units * step < to && tried < 101; units++, tried++) {
		const value = units * step;
		const distance = 2n * value > middle ? 2n * value - middle : middle - 2n * value;
		if ((best === null || distance < bestDistance) && !used.has(write(units, digits))) {
			best = units;
			bestDistance = distance;
		}
	}
	return best === null ? null : write(best, digits);
}
