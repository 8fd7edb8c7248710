import type { JobKind, WorkerClient } from "../../src/workers/index.ts";
import { jobs } from "../../src/workers/jobs.ts";

/** A client whose jobs run in this thread; asks and answers are copied, as they are on the way to a worker. */
export function createDirectClient(): WorkerClient & { readonly asked: JobKind[] } {
	const asked: JobKind[] = [];
	return {
		size: 1,
		asked,
		run: async (kind, ask, options) => {
			asked.push(kind);
			options?.signal?.throwIfAborted();
			const job = jobs[kind] as (ask: unknown, report: (share: number | null, stage: string) => void) => unknown;
			const answer = await job(structuredClone(ask), options?.onProgress ?? (() => {}));
			options?.signal?.throwIfAborted();
			return structuredClone(answer) as never;
		},
		close: () => {},
	};
}
