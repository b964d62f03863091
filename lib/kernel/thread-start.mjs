import { workerData } from "node:worker_threads";
import { register } from "tsx/esm/api";

// The loader of the parent does not reach a worker thread on this Node: it is registered here, then the script runs.
register();
await import(workerData.script);
