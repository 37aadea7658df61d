export { action, loader } from "./not-found.server.ts";

/** Never drawn: the loader always refuses. It stands here so that an address without a page has its headers. */
export default function NotFound() {
  return null;
}
