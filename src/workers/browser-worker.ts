/** Entry of a worker in the browser. */
import type { JobRequest } from "./protocol.ts";
import { serveJobs } from "./serve.ts";

serveJobs({
	onRequest: (listener) => {
		self.addEventListener("message", (event: MessageEvent<JobRequest>) => listener(event.data));
	},
	reply: (reply, transfer) => self.postMessage(reply, { transfer }),
});
