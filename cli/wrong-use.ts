/** What stops a command before it has judged anything: wrong arguments, nothing to read, an unreadable file. Exit 2. */
export class WrongUse extends Error {}
