export { action, loader } from "./sign-out.server.ts";
