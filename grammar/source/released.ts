/**
 * Files of released sets stand in a `FileSet` beside those of the set itself, under `name@version/path`. Whoever loads
 * the set puts them there: the core only looks.
 */
const RELEASED = /^([^/@]+@[^/]+)\/./;

/** `drives@1.4.0` of a file of a released set; null for one of the set itself. */
export function releaseOf(path: string): string | null {
  return RELEASED.exec(path)?.[1] ?? null;
}

/** A path as a file of a set writes it, as it stands in the `FileSet`: within a release it means the release's own. */
export function pathFrom(file: string, path: string): string {
  const release = releaseOf(file);
  return release === null || /^[^/]*@/.test(path) ? path : `${release}/${path}`;
}

/** How the path of a file in a release is written within it. */
export function pathInRelease(path: string): string {
  const release = releaseOf(path);
  return release === null ? path : path.slice(release.length + 1);
}
