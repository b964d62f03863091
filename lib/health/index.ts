export { readHealth } from "./read-health";
