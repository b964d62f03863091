export { claimJobs, completeJob, failJob, heartbeat, releaseLapsedLeases, reportProgress } from "./claim";
export { enqueue } from "./enqueue";
export { defineHandlers, type Handlers, type JobContext, type JobHandler } from "./handlers";
export { jobsFor, listFailedJobs, queueDepth } from "./reads";
export { runWorker, type WorkerOptions } from "./run-worker";
