#!/usr/bin/env node
import { StarstaveError } from "../core/units/index.ts";
import { type Answer, giveAnswer, requireAnswerPlace } from "./answer.ts";
import { type Arguments, type CommandShape, readArguments, usage } from "./arguments.ts";
import { createProgress, type Progress } from "./progress.ts";
import { analyseShape, checkShape, draftShape, handoffShape, retimeShape } from "./shapes.ts";

interface Command {
	readonly shape: CommandShape;
	/** Fetches the command when it is asked for: a wrong flag is answered without a planner. */
	load(): Promise<(given: Arguments, progress: Progress) => Promise<Answer>>;
}

const COMMANDS: readonly Command[] = [
	{ shape: analyseShape, load: async () => (await import("./commands/analyse.ts")).runAnalyse },
	{ shape: draftShape, load: async () => (await import("./commands/draft.ts")).runDraft },
	{ shape: checkShape, load: async () => (await import("./commands/check.ts")).runCheck },
	{ shape: retimeShape, load: async () => (await import("./commands/retime.ts")).runRetime },
	{ shape: handoffShape, load: async () => (await import("./commands/handoff.ts")).runHandoff },
];

function overview(): string {
	const width = Math.max(...COMMANDS.map(({ shape }) => shape.name.length));
	const lines = COMMANDS.map(({ shape }) => `  ${shape.name.padEnd(width)}  ${shape.summary}`);
	return [
		"Cut a drone routine to a soundtrack.",
		"",
		"starstave COMMAND …",
		"",
		...lines,
		"",
		"starstave COMMAND --help says more about each.",
		"Exit status: 0 done, 1 wrong use or bad input, 2 done and the answer is no.",
		"",
	].join("\n");
}

function help(shape: CommandShape): string {
	const left = (name: string, value: string | null): string => (value === null ? name : `${name} ${value}`);
	const width = Math.max(...shape.flags.map((flag) => left(flag.name, flag.value).length));
	const flags = shape.flags.map((flag) => `  ${left(flag.name, flag.value).padEnd(width)}  ${flag.help}`);
	return [`starstave ${usage(shape)}`, "", `${shape.summary}`, "", ...flags, "", ...shape.more, ""].join("\n");
}

/** One line: the command, then what is wrong, where, and what would be right. */
function complain(command: string | null, message: string): void {
	const name = command === null ? "starstave" : `starstave ${command}`;
	process.stderr.write(`${name}: ${message.replaceAll(/\s*\n\s*/g, " ")}\n`);
}

async function main(words: readonly string[]): Promise<number> {
	const [name, ...rest] = words;
	if (name === undefined || name === "--help" || name === "help") {
		process.stdout.write(overview());
		return name === undefined ? 1 : 0;
	}
	const command = COMMANDS.find(({ shape }) => shape.name === name);
	if (command === undefined) {
		complain(null, `"${name}" is no command; choose ${COMMANDS.map(({ shape }) => shape.name).join(", ")}, or --help.`);
		return 1;
	}
	if (rest.includes("--help")) {
		process.stdout.write(help(command.shape));
		return 0;
	}
	const progress = createProgress(name);
	try {
		const given = readArguments(command.shape, rest);
		requireAnswerPlace(given);
		const run = await command.load();
		const answer = await run(given, progress);
		progress.end();
		giveAnswer(answer, given);
		return answer.code;
	} catch (error) {
		progress.end();
		if (error instanceof StarstaveError) {
			complain(name, error.message);
			return 1;
		}
		const fault = error instanceof Error ? error : new Error(String(error));
		complain(name, `a fault of the program itself (${fault.message}); please report it with the lines below.`);
		process.stderr.write(`${fault.stack ?? ""}\n`);
		return 1;
	}
}

// Whoever reads may stop before the end (`| head`): that is no fault.
process.stdout.on("error", (error: NodeJS.ErrnoException) => {
	if (error.code !== "EPIPE") throw error;
});
process.exitCode = await main(process.argv.slice(2));
