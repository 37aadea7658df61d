import { z } from "zod";
import { openFile } from "../../operations/open-file.server.ts";
import { saveFiles } from "../../operations/save-files.server.ts";
import { signedIn } from "../../session/door.server.ts";
import { readJson } from "../../session/read-json.server.ts";
import type { Route } from "./+types/route.ts";

export const loader = signedIn((actor, { params }: Route.LoaderArgs) =>
  openFile(actor, { ...params, path: params["*"] }),
);

const saveBody = z.object({
  parent: z.string().nullable(),
  files: z.array(z.object({ path: z.string(), text: z.string().nullable() })),
  message: z.string(),
});

export const action = signedIn(async (actor, { request, params }: Route.ActionArgs) => {
  const { parent, files, message } = await readJson(request, saveBody);
  return saveFiles(actor, { team: params.team, set: params.set, branch: "main", parent, files, message });
});
