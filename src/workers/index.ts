export { createWorkerClient, type RunOptions, type WorkerClient, type WorkerHandle } from "./client.ts";
export type { JobAnswer, JobAsk, JobKind } from "./jobs.ts";
