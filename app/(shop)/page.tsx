export { default, metadata } from "./find/page";
