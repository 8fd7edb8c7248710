import { StarstaveError } from "../units/index.ts";

/**
 * Path data as SVG writes it (SVG 2, §9.3), read into absolute lines, Bézier curves and arcs. Shorthands are written
 * out: H and V are lines, S and T curves with their mirrored control point.
 */
export type Segment =
	| { readonly kind: "move"; readonly x: number; readonly y: number }
	| { readonly kind: "line"; readonly x: number; readonly y: number }
	| { readonly kind: "quadratic"; readonly x1: number; readonly y1: number; readonly x: number; readonly y: number }
	| {
			readonly kind: "cubic";
			readonly x1: number;
			readonly y1: number;
			readonly x2: number;
			readonly y2: number;
			readonly x: number;
			readonly y: number;
	  }
	| {
			readonly kind: "arc";
			readonly rx: number;
			readonly ry: number;
			/** Degrees of the ellipse's own axis. */
			readonly rotation: number;
			readonly large: boolean;
			readonly sweep: boolean;
			readonly x: number;
			readonly y: number;
	  }
	| { readonly kind: "close" };

interface Mirror {
	readonly kind: "cubic" | "quadratic";
	readonly x: number;
	readonly y: number;
}

/** Numbers that each command takes. */
const ARGUMENTS: Readonly<Record<string, number>> = { M: 2, L: 2, H: 1, V: 1, C: 6, S: 4, Q: 4, T: 2, A: 7, Z: 0 };

/** Reads one token after another; arc flags may stand without a space ("a1 1 0 0110 10"). */
class PathReader {
	private at = 0;
	private readonly text: string;

	constructor(text: string) {
		this.text = text;
	}

	private skip(): void {
		while (this.at < this.text.length && /[\s,]/.test(this.text[this.at])) this.at++;
	}

	/** The next command letter, null where a number or the end stands. */
	command(): string | null {
		this.skip();
		const letter = this.text[this.at] ?? "";
		if (!/[a-zA-Z]/.test(letter)) return null;
		this.at++;
		return letter;
	}

	ended(): boolean {
		this.skip();
		return this.at >= this.text.length;
	}

	number(): number {
		this.skip();
		const match = /^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?/.exec(this.text.slice(this.at, this.at + 40));
		if (match === null) throw this.refuse("a number");
		this.at += match[0].length;
		return Number(match[0]);
	}

	flag(): number {
		this.skip();
		const digit = this.text[this.at];
		if (digit !== "0" && digit !== "1") throw this.refuse("a flag, 0 or 1,");
		this.at++;
		return Number(digit);
	}

	refuse(wanted: string): StarstaveError {
		const found = this.text.slice(this.at, this.at + 12);
		return new StarstaveError(
			"formation",
			`Path data wants ${wanted} at character ${this.at + 1}, but ${found === "" ? "it ends there" : `has "${found}"`}.`,
		);
	}
}

/** @throws StarstaveError that names the character at which the data can't be read */
export function parsePathData(d: string): Segment[] {
	const reader = new PathReader(d);
	const segments: Segment[] = [];
	let [x, y, startX, startY] = [0, 0, 0, 0];
	// Last control point, for S and T; null after any other command.
	let mirror: Mirror | null = null;
	let letter: string | null = null;
	while (!reader.ended()) {
		const next: string | null = reader.command();
		if (next === null) {
			// Numbers that go on repeat the command; after a moveto they are lines.
			if (letter === null || letter === "Z" || letter === "z") throw reader.refuse("a command");
			if (letter === "M") letter = "L";
			if (letter === "m") letter = "l";
		} else {
			letter = next;
			if (ARGUMENTS[letter.toUpperCase()] === undefined) throw reader.refuse("a path command before this place");
			if (segments.length === 0 && letter.toUpperCase() !== "M") throw reader.refuse("M first, before this place");
		}
		const command: string = letter.toUpperCase();
		const [ox, oy]: [number, number] = letter === command ? [0, 0] : [x, y];
		const values: number[] = [];
		for (let i = 0; i < ARGUMENTS[command]; i++)
			values.push(command === "A" && (i === 3 || i === 4) ? reader.flag() : reader.number());
		const [a, b, c, e, f, g, h] = values;
		let kept: Mirror | null = null;
		switch (command) {
			case "M":
				[x, y] = [ox + a, oy + b];
				[startX, startY] = [x, y];
				segments.push({ kind: "move", x, y });
				break;
			case "L":
				[x, y] = [ox + a, oy + b];
				segments.push({ kind: "line", x, y });
				break;
			case "H":
				x = ox + a;
				segments.push({ kind: "line", x, y });
				break;
			case "V":
				y = oy + a;
				segments.push({ kind: "line", x, y });
				break;
			case "C":
			case "S": {
				const short = command === "S";
				const x1 = short ? (mirror?.kind === "cubic" ? 2 * x - mirror.x : x) : ox + a;
				const y1 = short ? (mirror?.kind === "cubic" ? 2 * y - mirror.y : y) : oy + b;
				const [x2, y2] = short ? [ox + a, oy + b] : [ox + c, oy + e];
				[x, y] = short ? [ox + c, oy + e] : [ox + f, oy + g];
				segments.push({ kind: "cubic", x1, y1, x2, y2, x, y });
				kept = { kind: "cubic", x: x2, y: y2 };
				break;
			}
			case "Q":
			case "T": {
				const short = command === "T";
				const x1: number = short ? (mirror?.kind === "quadratic" ? 2 * x - mirror.x : x) : ox + a;
				const y1: number = short ? (mirror?.kind === "quadratic" ? 2 * y - mirror.y : y) : oy + b;
				[x, y] = short ? [ox + a, oy + b] : [ox + c, oy + e];
				segments.push({ kind: "quadratic", x1, y1, x, y });
				kept = { kind: "quadratic", x: x1, y: y1 };
				break;
			}
			case "A":
				[x, y] = [ox + g, oy + h];
				segments.push({
					kind: "arc",
					rx: Math.abs(a),
					ry: Math.abs(b),
					rotation: c,
					large: e === 1,
					sweep: f === 1,
					x,
					y,
				});
				break;
			default:
				[x, y] = [startX, startY];
				segments.push({ kind: "close" });
		}
		mirror = kept;
	}
	return segments;
}
