import { createWorkerClient, type WorkerClient, type WorkerHandle } from "./client.ts";

function startWorker(): WorkerHandle {
	const worker = new Worker(new URL("./browser-worker.ts", import.meta.url), { type: "module", name: "starstave" });
	return {
		post: (request, transfer) => worker.postMessage(request, transfer),
		onReply: (listener) => {
			worker.onmessage = (event) => listener(event.data);
		},
		onFailure: (listener) => {
			worker.onerror = (event) => {
				event.preventDefault();
				listener(event.message || "a worker could not be started");
			};
			worker.onmessageerror = () => listener("a worker's answer could not be read");
		},
		end: () => worker.terminate(),
	};
}

/** Workers of the browser: one a core, at least two so that a long job never holds up a short one, at most four. */
export function createBrowserWorkers(): WorkerClient {
	const cores = navigator.hardwareConcurrency || 2;
	return createWorkerClient(startWorker, Math.min(4, Math.max(2, cores)));
}
