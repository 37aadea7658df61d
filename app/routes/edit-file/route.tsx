import { useMemo } from "react";
import "katex/dist/katex.min.css";
import { type ShouldRevalidateFunctionArgs, useRouteLoaderData } from "react-router";
import { Fault } from "../../components/fault.tsx";
import { FacingPages } from "../../editor/facing-pages.tsx";
import type { loader as rootLoader } from "../../root.server.ts";
import type { Route } from "./+types/route.ts";

export { action, loader } from "./edit-file.server.ts";

export const meta: Route.MetaFunction = ({ loaderData, params }) => [
  { title: `${params["*"]} · ${loaderData?.set.name ?? "Model set"} · Bondwright` },
];

/**
 * The page holds all texts of the set: turning to another file, or choosing what is shown, asks the server for
 * nothing. Only when it is asked outright does it fetch the newest version.
 */
export function shouldRevalidate(args: ShouldRevalidateFunctionArgs): boolean {
  const { currentParams, nextParams, currentUrl, nextUrl, formMethod } = args;
  if (currentParams.team !== nextParams.team || currentParams.set !== nextParams.set) return true;
  return formMethod === undefined && currentUrl.href === nextUrl.href;
}

export default function EditFile({ loaderData, actionData, params }: Route.ComponentProps) {
  const root = useRouteLoaderData<typeof rootLoader>("root");
  const files = useMemo(() => new Map(loaderData.files), [loaderData.files]);
  const { team, set } = loaderData;
  return (
    <FacingPages
      key={`${team.slug}/${set.slug}`}
      person={root?.person?.id ?? ""}
      team={team.slug}
      set={set.slug}
      path={params["*"]}
      commit={loaderData.commit}
      files={files}
      mayWrite={loaderData.may.includes("set.write")}
      answer={actionData}
    />
  );
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  return (
    <Fault error={error}>
      <p className="mt-2">
        Unsaved text of this set is kept in this browser and stands here again when you come back.
      </p>
    </Fault>
  );
}
