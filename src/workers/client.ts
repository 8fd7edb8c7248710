import type { JobAnswer, JobAsk, JobKind } from "./jobs.ts";
import { type JobReply, type JobRequest, unpackError } from "./protocol.ts";

/** One running worker, as browser and Node hand it over. */
export interface WorkerHandle {
	post(request: JobRequest, transfer: ArrayBuffer[]): void;
	onReply(listener: (reply: JobReply) => void): void;
	/** The worker itself has fallen over or never came up. */
	onFailure(listener: (message: string) => void): void;
	end(): void;
}

export interface RunOptions {
	readonly onProgress?: (share: number | null, stage: string) => void;
	/** Aborting ends the worker, since a busy loop hears no message; another is started for the next job. */
	readonly signal?: AbortSignal;
	/** Buffers handed over instead of copied; the caller must not use them again. */
	readonly transfer?: ArrayBuffer[];
	/** Goes before everything that waits. */
	readonly urgent?: boolean;
}

/** Runs jobs in workers, as many side by side as there are workers. */
export interface WorkerClient {
	/** How many jobs run side by side. */
	readonly size: number;
	/**
	 * @returns the job's answer
	 * @throws what the job threw: StarstaveError where the user can put it right; a DOMException "AbortError" when aborted
	 */
	run<K extends JobKind>(kind: K, ask: JobAsk<K>, options?: RunOptions): Promise<JobAnswer<K>>;
	/** Ends every worker; what was running or waiting is aborted. */
	close(): void;
}

interface Task {
	readonly request: JobRequest;
	readonly options: RunOptions;
	readonly resolve: (answer: unknown) => void;
	readonly reject: (error: unknown) => void;
	readonly onAbort: () => void;
}

interface Seat {
	handle: WorkerHandle;
	task: Task | null;
}

const aborted = (): DOMException => new DOMException("The job was cancelled.", "AbortError");

/** @param start starts one worker @param most how many may run */
export function createWorkerClient(start: () => WorkerHandle, most: number): WorkerClient {
	const seats: Seat[] = [];
	const waiting: Task[] = [];
	let lastId = 0;

	const settle = (task: Task, finish: () => void): void => {
		task.options.signal?.removeEventListener("abort", task.onAbort);
		finish();
	};

	const openSeat = (): Seat => {
		const handle = start();
		const seat: Seat = { handle, task: null };
		handle.onReply((reply) => {
			const { task } = seat;
			if (task === null || reply.id !== task.request.id) return;
			if (reply.type === "progress") return task.options.onProgress?.(reply.share, reply.stage);
			seat.task = null;
			settle(task, () => (reply.type === "done" ? task.resolve(reply.answer) : task.reject(unpackError(reply.error))));
			next();
		});
		handle.onFailure((message) => {
			const { task } = seat;
			leave(seat);
			if (task !== null) settle(task, () => task.reject(new Error(`A worker ended before its time: ${message}`)));
			next();
		});
		seats.push(seat);
		return seat;
	};

	const leave = (seat: Seat): void => {
		const index = seats.indexOf(seat);
		if (index >= 0) seats.splice(index, 1);
		seat.task = null;
		seat.handle.end();
	};

	const next = (): void => {
		while (waiting.length > 0) {
			const seat = seats.find((one) => one.task === null) ?? (seats.length < most ? openSeat() : null);
			if (seat === null) return;
			const task = waiting.shift()!;
			seat.task = task;
			try {
				seat.handle.post(task.request, task.options.transfer ?? []);
			} catch (error) {
				// What can't be copied never left; the worker is still good.
				seat.task = null;
				settle(task, () => task.reject(error));
			}
		}
	};

	const cancel = (task: Task): void => {
		const index = waiting.indexOf(task);
		if (index >= 0) waiting.splice(index, 1);
		const seat = seats.find((one) => one.task === task);
		if (seat !== undefined) leave(seat);
		settle(task, () => task.reject(aborted()));
		next();
	};

	return {
		size: most,
		run: <K extends JobKind>(kind: K, ask: JobAsk<K>, options: RunOptions = {}) =>
			new Promise<JobAnswer<K>>((resolve, reject) => {
				if (options.signal?.aborted) return reject(aborted());
				const task: Task = {
					request: { id: ++lastId, kind, ask },
					options,
					resolve: resolve as (answer: unknown) => void,
					reject,
					onAbort: () => cancel(task),
				};
				options.signal?.addEventListener("abort", task.onAbort);
				if (options.urgent) waiting.unshift(task);
				else waiting.push(task);
				next();
			}),
		close: () => {
			for (const task of [...waiting]) cancel(task);
			for (const seat of [...seats]) {
				const { task } = seat;
				leave(seat);
				if (task !== null) settle(task, () => task.reject(aborted()));
			}
		},
	};
}
