import { describe, expect, it } from "vitest";
import { StarstaveError } from "../../src/core/units/index.ts";
import { createWorkerClient, type WorkerHandle } from "../../src/workers/client.ts";
import { buffersIn, type JobReply, type JobRequest, packError, unpackError } from "../../src/workers/protocol.ts";

/** Workers that answer when the test says so. */
function createBench() {
	const workers: {
		requests: JobRequest[];
		ended: boolean;
		reply(reply: JobReply): void;
		fail(message: string): void;
	}[] = [];
	const start = (): WorkerHandle => {
		let onReply: (reply: JobReply) => void = () => {};
		let onFailure: (message: string) => void = () => {};
		const worker = {
			requests: [] as JobRequest[],
			ended: false,
			reply: (reply: JobReply) => onReply(reply),
			fail: (message: string) => onFailure(message),
		};
		workers.push(worker);
		return {
			post: (request) => void worker.requests.push(request),
			onReply: (listener) => {
				onReply = listener;
			},
			onFailure: (listener) => {
				onFailure = listener;
			},
			end: () => {
				worker.ended = true;
			},
		};
	};
	return { workers, start };
}

const ask = { bytes: new Uint8Array(1) };
const shares: (number | null)[] = [];

describe("the workers' client", () => {
	it("runs as many jobs side by side as it may, the rest wait their turn", async () => {
		const { workers, start } = createBench();
		const client = createWorkerClient(start, 2);
		const answers = [client.run("read", ask), client.run("read", ask), client.run("read", ask)];
		expect(workers.map(({ requests }) => requests.length)).toEqual([1, 1]);
		const first = workers[0].requests[0];
		workers[0].reply({ id: first.id, type: "done", answer: "one" });
		expect(await answers[0]).toBe("one");
		expect(workers[0].requests.length).toBe(2);
		expect(workers.length).toBe(2);
		client.close();
		await expect(answers[1]).rejects.toThrow("cancelled");
		await expect(answers[2]).rejects.toThrow("cancelled");
		expect(workers.every(({ ended }) => ended)).toBe(true);
	});

	it("lets an urgent job go before those that wait", () => {
		const { workers, start } = createBench();
		const client = createWorkerClient(start, 1);
		const options = { onProgress: () => {} };
		const waits = [
			client.run("read", ask),
			client.run("read", ask),
			client.run("write", {} as never, { ...options, urgent: true }),
		];
		for (const wait of waits) wait.catch(() => {});
		workers[0].reply({ id: workers[0].requests[0].id, type: "done", answer: null });
		expect(workers[0].requests[1].kind).toBe("write");
		client.close();
	});

	it("passes progress on, and no word of it after the answer", async () => {
		const { workers, start } = createBench();
		const client = createWorkerClient(start, 1);
		shares.length = 0;
		const answer = client.run("read", ask, { onProgress: (share) => void shares.push(share) });
		const { id } = workers[0].requests[0];
		workers[0].reply({ id, type: "progress", share: 0.5, stage: "half" });
		workers[0].reply({ id, type: "done", answer: 1 });
		workers[0].reply({ id, type: "progress", share: 0.9, stage: "late" });
		await answer;
		expect(shares).toEqual([0.5]);
	});

	it("ends the worker of a job that is cancelled, and starts another for the next", async () => {
		const { workers, start } = createBench();
		const client = createWorkerClient(start, 1);
		const controller = new AbortController();
		const cancelled = client.run("read", ask, { signal: controller.signal });
		const next = client.run("read", ask);
		controller.abort();
		await expect(cancelled).rejects.toMatchObject({ name: "AbortError" });
		expect(workers[0].ended).toBe(true);
		expect(workers.length).toBe(2);
		workers[1].reply({ id: workers[1].requests[0].id, type: "done", answer: "after" });
		expect(await next).toBe("after");
	});

	it("takes a cancelled job off the waiting list without ending anybody's worker", async () => {
		const { workers, start } = createBench();
		const client = createWorkerClient(start, 1);
		const controller = new AbortController();
		const running = client.run("read", ask);
		const waiting = client.run("read", ask, { signal: controller.signal });
		controller.abort();
		await expect(waiting).rejects.toMatchObject({ name: "AbortError" });
		expect(workers[0].ended).toBe(false);
		workers[0].reply({ id: workers[0].requests[0].id, type: "done", answer: 1 });
		await running;
		expect(workers[0].requests.length).toBe(1);
	});

	it("goes on with another worker when one falls over", async () => {
		const { workers, start } = createBench();
		const client = createWorkerClient(start, 1);
		const lost = client.run("read", ask);
		const next = client.run("read", ask);
		workers[0].fail("out of memory");
		await expect(lost).rejects.toThrow("out of memory");
		workers[1].reply({ id: workers[1].requests[0].id, type: "done", answer: 2 });
		expect(await next).toBe(2);
	});
});

describe("the workers' protocol", () => {
	it("brings a StarstaveError across as one, with its area", () => {
		const error = unpackError(packError(new StarstaveError("formation", "The ring has no slots.")));
		expect(error).toBeInstanceOf(StarstaveError);
		expect(error).toMatchObject({ area: "formation", message: "The ring has no slots." });
	});

	it("brings a fault of the program across as a plain error with its stack", () => {
		const error = unpackError(packError(new TypeError("x is undefined")));
		expect(error).not.toBeInstanceOf(StarstaveError);
		expect(error.message).toBe("x is undefined");
		expect(String(error.cause)).toContain("client.test.ts");
	});

	it("finds every buffer of an answer once, in lists, maps and nested things", () => {
		const a = new Float64Array(4);
		const b = new Uint8Array(2);
		const answer = {
			list: [{ a }, { again: a }],
			map: new Map([["b", { b }]]),
			text: "no",
			numbers: [1, 2, 3],
			none: null,
		};
		expect(new Set(buffersIn(answer))).toEqual(new Set([a.buffer, b.buffer]));
		expect(buffersIn(answer).length).toBe(2);
	});
});
