let waiting: ReturnType<typeof setTimeout> | undefined;

/** The line of the cursor goes into the address, so that reload, a copied link and Back find it again. */
export function rememberLine(line: number): void {
  clearTimeout(waiting);
  waiting = setTimeout(() => {
    const { pathname, search } = window.location;
    window.history.replaceState(window.history.state, "", `${pathname}${search}${lineHash(line)}`);
  }, 400);
}

export function lineHash(line: number): string {
  return `#line-${line}`;
}

export function lineOfHash(hash: string): number | null {
  const found = /^#line-(\d{1,7})$/.exec(hash);
  return found === null ? null : Number(found[1]);
}
