import * as peopleAndTeams from "./0001-people-and-teams.ts";
import * as modelSets from "./0002-model-sets.ts";
import * as journal from "./0003-journal.ts";

/** In the order in which they are applied. A name that has been released is never changed. */
export const migrations = [
  { name: "0001-people-and-teams", ...peopleAndTeams },
  { name: "0002-model-sets", ...modelSets },
  { name: "0003-journal", ...journal },
];
