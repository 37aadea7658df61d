export { loader } from "./health.server.ts";
