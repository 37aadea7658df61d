/** Plain http on this machine itself, where a browser takes no `Secure` cookie and nobody listens in. */
export function isPlainLoopback({ protocol, hostname }: URL): boolean {
  return protocol === "http:" && /^(localhost|127(\.\d+){3}|\[::1\])$/.test(hostname);
}
