import { StarstaveError } from "../core/units/index.ts";

/** A flag of a command. A switch takes no value. */
export interface Flag {
	readonly name: string;
	/** What stands for the value in the help, or null for a switch. */
	readonly value: string | null;
	readonly help: string;
}

export interface CommandShape {
	readonly name: string;
	/** One line for the list of commands. */
	readonly summary: string;
	/** What must stand after the command, in order: "TRACK", "SHOW". */
	readonly operands: readonly string[];
	readonly flags: readonly Flag[];
	/** Flags that must be given. */
	readonly required: readonly string[];
	/** Lines below the flags. */
	readonly more: readonly string[];
}

export interface Arguments {
	readonly operands: readonly string[];
	readonly values: ReadonlyMap<string, string>;
	readonly switches: ReadonlySet<string>;
}

function refuse(sentence: string): never {
	throw new StarstaveError("command", sentence);
}

/**
 * The words after a command, held against its shape. `--flag value` and `--flag=value` are the same; `--` ends the flags.
 * @throws StarstaveError one sentence: which word is wrong and what would be right
 */
export function readArguments(command: CommandShape, words: readonly string[]): Arguments {
	const operands: string[] = [];
	const values = new Map<string, string>();
	const switches = new Set<string>();
	let flagsOver = false;
	for (let i = 0; i < words.length; i++) {
		const word = words[i];
		if (flagsOver || !word.startsWith("--")) {
			operands.push(word);
			continue;
		}
		if (word === "--") {
			flagsOver = true;
			continue;
		}
		const equals = word.indexOf("=");
		const name = equals < 0 ? word : word.slice(0, equals);
		const flag = command.flags.find((known) => known.name === name);
		if (flag === undefined) {
			refuse(`${name} is no flag of ${command.name}; it takes ${command.flags.map((known) => known.name).join(", ")}.`);
		}
		if (values.has(name) || switches.has(name)) refuse(`${name} is given twice; give it once.`);
		if (flag.value === null) {
			if (equals >= 0) refuse(`${name} takes no value; leave out "${word.slice(equals)}".`);
			switches.add(name);
			continue;
		}
		const value = equals < 0 ? words[++i] : word.slice(equals + 1);
		if (value === undefined || value === "" || (equals < 0 && value.startsWith("--"))) {
			refuse(`${name} is given without a value; write ${name} ${flag.value}.`);
		}
		values.set(name, value);
	}
	if (operands.length < command.operands.length) {
		refuse(`${command.operands[operands.length]} is missing; write starstave ${usage(command)}.`);
	}
	if (operands.length > command.operands.length) {
		refuse(`"${operands[command.operands.length]}" is one word too many; write starstave ${usage(command)}.`);
	}
	for (const name of command.required) {
		if (!values.has(name)) refuse(`${name} is missing; write starstave ${usage(command)}.`);
	}
	return { operands, values, switches };
}

/** "draft TRACK --drones N --out SHOW [--force] …" */
export function usage(command: CommandShape): string {
	const written = (flag: Flag): string => (flag.value === null ? flag.name : `${flag.name} ${flag.value}`);
	const flags = command.flags.map((flag) =>
		command.required.includes(flag.name) ? written(flag) : `[${written(flag)}]`,
	);
	return [command.name, ...command.operands, ...flags].join(" ");
}

/**
 * A flag's value as a number.
 * @throws StarstaveError where it is none, not whole though it must be, or out of range
 */
export function numberFlag(
	given: Arguments,
	name: string,
	otherwise: number,
	range: { readonly least: number; readonly most: number; readonly whole: boolean },
): number {
	const text = given.values.get(name);
	if (text === undefined) return otherwise;
	const value = Number(text);
	const right = `must be a ${range.whole ? "whole " : ""}number from ${range.least} to ${range.most}`;
	if (
		!Number.isFinite(value) ||
		value < range.least ||
		value > range.most ||
		(range.whole && !Number.isInteger(value))
	) {
		refuse(`${name} is ${text}, but ${right}.`);
	}
	return value;
}
