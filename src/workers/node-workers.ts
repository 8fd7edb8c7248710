import { availableParallelism } from "node:os";
import { Worker } from "node:worker_threads";
import { createWorkerClient, type WorkerClient, type WorkerHandle } from "./client.ts";

/**
 * Workers of Node.
 * @param entry the bundled `node-worker.ts`
 */
export function createNodeWorkers(entry: URL, most = Math.min(4, Math.max(1, availableParallelism()))): WorkerClient {
	const startWorker = (): WorkerHandle => {
		const worker = new Worker(entry);
		// A client that nobody closed must not keep the program from ending.
		worker.unref();
		return {
			post: (request, transfer) => {
				worker.ref();
				worker.postMessage(request, transfer);
			},
			onReply: (listener) =>
				worker.on("message", (reply) => {
					if (reply.type !== "progress") worker.unref();
					listener(reply);
				}),
			onFailure: (listener) => worker.on("error", (error) => listener(error.message)),
			end: () => void worker.terminate(),
		};
	};
	return createWorkerClient(startWorker, most);
}
