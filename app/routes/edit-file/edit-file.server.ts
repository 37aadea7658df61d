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
  const plain = isForm(request);
  const { parent, files, message } = plain ? await readForm(request) : await readJson(request, saveBody);
  const address = { team: params.team, set: params.set, branch: "main" as const };
  const answer = await saveFiles(actor, { ...address, parent, files, message });
  // The page that follows a plain form must show the text again, saved or not.
  return plain ? { ...answer, sent: files.map(({ path, text }) => ({ path, text: text ?? "" })) } : answer;
});

function isForm(request: Request): boolean {
  return request.headers.get("Content-Type")?.startsWith("application/x-www-form-urlencoded") ?? false;
}

/** One file from the plain form, as a page without scripts sends it, whose line ends are always CR LF. */
async function readForm(request: Request): Promise<z.output<typeof saveBody>> {
  const form = await request.formData();
  const field = (name: string) => String(form.get(name) ?? "").replaceAll("\r\n", "\n");
  return {
    parent: field("parent") || null,
    files: [{ path: field("path"), text: field("text") }],
    message: field("message"),
  };
}
