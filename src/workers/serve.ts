import { type JobKind, jobs } from "./jobs.ts";
import { buffersIn, type JobReply, type JobRequest, packError } from "./protocol.ts";

/** How a worker talks to whoever started it; browser and Node differ in no more than this. */
export interface WorkerSide {
	onRequest(listener: (request: JobRequest) => void): void;
	reply(reply: JobReply, transfer: ArrayBuffer[]): void;
}

type AnyJob = (ask: unknown, report: (share: number | null, stage: string) => void) => unknown;

/** Answers requests with the jobs of the core. The worker is nothing but this adapter. */
export function serveJobs(side: WorkerSide): void {
	side.onRequest(async ({ id, kind, ask }) => {
		const report = (share: number | null, stage: string): void =>
			side.reply({ id, type: "progress", share, stage }, []);
		try {
			// The client's types have seen that the ask fits its kind.
			const job = jobs[kind as JobKind] as AnyJob;
			const answer = await job(ask, report);
			side.reply({ id, type: "done", answer }, buffersIn(answer));
		} catch (error) {
			side.reply({ id, type: "failed", error: packError(error) }, []);
		}
	});
}
