export { loader } from "./worker.server.ts";
