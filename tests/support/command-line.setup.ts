import { buildWhenChanged } from "../../db/bring-up/build.mjs";

/** Tests of the command line run the one built file, `build/cli/bondwright.mjs`. */
export default function setup() {
  buildWhenChanged(["cli"]);
}
