/**
 * Comma-separated values as RFC 4180 (2005) writes them, with lines ended by LF (parsers take both).
 * What a spreadsheet would run as a formula is kept from running: text that starts with = + - @, a tab or a line break
 * gets an apostrophe in front (OWASP, "CSV Injection"). Numbers are numbers and stay as they are.
 */
export type Cell = string | number | boolean | null;

function guard(text: string): string {
	return /^[=+\-@\t\r\n]/.test(text) ? `'${text}` : text;
}

export function writeCell(cell: Cell): string {
	if (cell === null) return "";
	if (typeof cell === "boolean") return cell ? "yes" : "no";
	if (typeof cell === "number") return String(cell);
	const text = guard(cell);
	return /[",\r\n]/.test(text) ? `"${text.replaceAll('"', '""')}"` : text;
}

/** @returns header and rows, each line ended by LF */
export function writeCsv(header: readonly string[], rows: readonly (readonly Cell[])[]): string {
	return [header, ...rows].map((row) => `${row.map(writeCell).join(",")}\n`).join("");
}
