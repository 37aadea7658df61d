/**
 * A worker obeys only the policy in its own response, so the built ones are served by a route that sets it.
 * In development the module itself is loaded.
 */
export function workerAddress(builtUrl: string): string {
  if (import.meta.env.DEV) return builtUrl;
  return `/w/${builtUrl.slice(builtUrl.lastIndexOf("/") + 1)}`;
}
