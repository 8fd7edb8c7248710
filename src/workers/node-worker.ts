/** Entry of a worker in Node. */
import { parentPort } from "node:worker_threads";
import { serveJobs } from "./serve.ts";

const port = parentPort;
if (port === null) throw new Error("This file runs as a worker; start it through createNodeWorkers.");

serveJobs({
	onRequest: (listener) => port.on("message", listener),
	reply: (reply, transfer) => port.postMessage(reply, transfer),
});
