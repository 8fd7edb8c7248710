/**
 * Reads flight paths back from their CSVs. Nothing of the program is imported here or in the oracle: what is judged is
 * the files as anyone would read them.
 */

/** One table put together from its files: launch, show, landing. */
export interface ReadTable {
	readonly drones: number;
	/** Seconds of every row, rising. */
	readonly times: Float64Array;
	/** times.length × drones × 3 numbers: row after row. */
	readonly values: Float64Array;
}

/** "positions-launch-0060.csv" → its place in the order of time. */
function order(name: string): number {
	const match = /^(?:positions|light)-(launch-|landing-|)(\d{4,})\.csv$/.exec(name);
	if (match === null) throw new Error(`${name} is not a name of a table`);
	const part = { "launch-": 0, "": 1, "landing-": 2 }[match[1]] ?? 3;
	if (Number(match[2]) % 60 !== 0) throw new Error(`${name} does not start at a multiple of 60 s`);
	return part * 1e6 + Number(match[2]);
}

/**
 * @param files name → bytes of the zip
 * @param rate rows a second that every time must be a whole multiple of
 * @throws Error where header, order, count, grid of times or the form of a number is not as it should be
 */
export function readTable(
	files: Readonly<Record<string, Uint8Array>>,
	table: "positions" | "light",
	rate: number,
): ReadTable {
	const header = table === "positions" ? "drone,seconds,right_m,away_m,up_m" : "drone,seconds,red,green,blue";
	const form = table === "positions" ? /^-?\d+\.\d{6}$/ : /^\d{1,3}$/;
	const names = Object.keys(files).filter((name) => name.startsWith(`${table}-`));
	for (const name of names) order(name);
	names.sort((a, b) => order(a) - order(b));
	let drones = 0;
	const times: number[] = [];
	const blocks: Float64Array[] = [];
	for (const name of names) {
		const text = new TextDecoder("utf-8", { fatal: true }).decode(files[name]);
		if (text.includes("\r") || !text.endsWith("\n")) throw new Error(`${name}: lines must end with LF`);
		const lines = text.slice(0, -1).split("\n");
		if (lines[0] !== header) throw new Error(`${name}: header is ${lines[0]}`);
		const rows = lines.slice(1).map((line) => line.split(","));
		const count = rows.findIndex((row) => row[0] !== "1");
		const instants = count < 0 ? rows.length : count;
		if (rows.length % instants !== 0) throw new Error(`${name}: drones have unequal numbers of rows`);
		if (instants > 60 * rate) throw new Error(`${name}: holds more than 60 s`);
		const shown = /^[a-z]+-(\d+)\.csv$/.exec(name);
		if (shown !== null && Number(rows[0][1]) !== Number(shown[1])) {
			throw new Error(`${name}: starts at ${rows[0][1]} s, but its name says ${Number(shown[1])}`);
		}
		const fleet = rows.length / instants;
		if (drones !== 0 && fleet !== drones) throw new Error(`${name}: ${fleet} drones, ${drones} before`);
		drones = fleet;
		const block = new Float64Array(instants * drones * 3);
		rows.forEach((row, at) => {
			const drone = Math.floor(at / instants);
			const instant = at % instants;
			if (row.length !== 5 || row[0] !== String(drone + 1)) throw new Error(`${name}: row ${at + 2} is ${row}`);
			if (!/^-?\d+\.\d{6}$/.test(row[1]) || !row.slice(2).every((cell) => form.test(cell))) {
				throw new Error(`${name}: row ${at + 2} holds a cell of another form: ${row}`);
			}
			const time = Number(row[1]);
			const step = Math.round(time * rate);
			if (Math.abs(step / rate - time) > 5.1e-7) throw new Error(`${name}: ${time} s is no multiple of 1/${rate} s`);
			if (drone === 0) {
				if (times.length > 0 && step !== Math.round(times[times.length - 1] * rate) + 1) {
					throw new Error(`${name}: ${times[times.length - 1]} s is followed by ${time} s`);
				}
				times.push(time);
			} else if (times[times.length - instants + instant] !== time) {
				throw new Error(`${name}: drone ${drone + 1} has another time than drone 1 in row ${at + 2}`);
			}
			for (let i = 0; i < 3; i++) block[(instant * drones + drone) * 3 + i] = Number(row[2 + i]);
		});
		blocks.push(block);
	}
	const values = new Float64Array(times.length * drones * 3);
	let at = 0;
	for (const block of blocks) {
		values.set(block, at);
		at += block.length;
	}
	return { drones, times: Float64Array.from(times), values };
}
