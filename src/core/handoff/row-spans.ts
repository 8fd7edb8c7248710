/**
 * Which rows stand in which file. Row k of a table is the time k / rate, in seconds from the soundtrack's first sample;
 * launch comes before row 0, landing after the last row of the show. Files take 60 s each.
 */
export interface RowFile {
	/** "launch-0000", "0060", "landing-0000": what follows the table's name. */
	readonly suffix: string;
	/** First and last row, both in the file. */
	readonly first: number;
	readonly last: number;
}

const FILE_SECONDS = 60;

function cut(prefix: string, first: number, last: number, rate: number, into: RowFile[]): void {
	const size = FILE_SECONDS * rate;
	for (let at = first, n = 0; at <= last; at += size, n++) {
		const suffix = prefix + String(n * FILE_SECONDS).padStart(4, "0");
		into.push({ suffix, first: at, last: Math.min(at + size - 1, last) });
	}
}

/**
 * @param begins seconds: motors start (launch is everything before 0)
 * @param end seconds: end of the show's music
 * @param ends seconds: the last drone is down (landing is everything past `end`)
 * @param rate rows a second, a whole number
 */
export function rowFiles(begins: number, end: number, ends: number, rate: number): RowFile[] {
	const files: RowFile[] = [];
	// A hair keeps a time that is a whole multiple from gaining a row by the last bit of its product.
	const hair = 1e-9;
	const first = Math.floor(begins * rate + hair);
	const lastOfShow = Math.max(0, Math.floor(end * rate + hair));
	const last = Math.ceil(ends * rate - hair);
	cut("launch-", Math.min(first, 0), -1, rate, files);
	cut("", 0, lastOfShow, rate, files);
	cut("landing-", lastOfShow + 1, last, rate, files);
	return files;
}
