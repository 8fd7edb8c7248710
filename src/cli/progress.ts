/** Progress on stderr: one line a stage, and on a terminal its share as it grows. */
export interface Progress {
	tell(share: number, stage: string): void;
	/** Ends the line on a terminal. */
	end(): void;
}

export function createProgress(command: string): Progress {
	const terminal = process.stderr.isTTY === true;
	let last = "";
	let open = false;
	return {
		tell(share, stage) {
			const whole = Math.floor(100 * Math.min(1, Math.max(0, share)));
			const doing = stage.charAt(0).toLowerCase() + stage.slice(1);
			const line = terminal ? `${command}: ${doing}, ${whole} %` : `${command}: ${doing}`;
			if (line === last) return;
			last = line;
			open = terminal;
			process.stderr.write(terminal ? `\r\u001b[K${line}` : `${line}\n`);
		},
		end() {
			if (open) process.stderr.write("\r\u001b[K");
			open = false;
			last = "";
		},
	};
}

/** CPU seconds of the whole process since a mark. */
export function cpuSince(mark: NodeJS.CpuUsage): number {
	const { user, system } = process.cpuUsage(mark);
	return (user + system) / 1e6;
}

/** Seconds on the wall since a mark of `performance.now()`. */
export function secondsSince(mark: number): number {
	return (performance.now() - mark) / 1000;
}
