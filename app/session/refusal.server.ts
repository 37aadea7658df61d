import { data } from "react-router";

/** What the page of a refusal is given, as `error.data`. */
export interface Refusal {
  message: string;
}

/** Ends the work on a request with a status and one sentence for the person who asked. */
export function refuse(status: 400 | 401 | 403 | 404 | 409 | 500 | 503, message: string): never {
  throw data<Refusal>({ message }, { status });
}
