import { buildWhenChanged } from "../../db/bring-up/build.mjs";

/** Browser tests run against the built server. */
export default function setup() {
  buildWhenChanged(["application"]);
}
