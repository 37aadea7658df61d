import { createContext } from "react-router";

/** The word that marks the scripts of one response as ours: for the policy and for the rendering of the page. */
export const nonceContext = createContext<string>("");

/** The name of one request, in the log and in its response. */
export const requestIdContext = createContext<string>("");
