import { pino } from "pino";

/** One line of JSON an event, on standard error. No secret, address query or body goes in. */
export const log = pino({ base: undefined, level: process.env.LOG_LEVEL ?? "info" }, pino.destination(2));
