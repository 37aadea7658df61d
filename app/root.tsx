import type { ReactNode } from "react";
import { Links, Meta, Outlet, Scripts, ScrollRestoration, useRouteLoaderData } from "react-router";
import type { Route } from "./+types/root.ts";
import "./app.css";
import { Fault } from "./components/fault.tsx";
import { RunningHead } from "./components/running-head.tsx";

export { loader, middleware } from "./root.server.ts";

export const meta: Route.MetaFunction = () => [
  { title: "Bondwright" },
  { name: "description", content: "Bond graphs as text, with the equations that follow from them." },
];

export const links: Route.LinksFunction = () => [
  { rel: "icon", href: "/favicon.svg", type: "image/svg+xml" },
];

export function Layout({ children }: { children: ReactNode }) {
  const root = useRouteLoaderData<typeof import("./root.server.ts").loader>("root");
  const theme = root?.theme ?? "system";
  return (
    <html lang="en" data-theme={theme === "system" ? undefined : theme} suppressHydrationWarning>
      <head>
        <meta charSet="utf-8" />
        <meta name="viewport" content="width=device-width, initial-scale=1" />
        <Meta />
        <Links nonce="" />
      </head>
      <body>
        {children}
        <ScrollRestoration />
        <Scripts />
      </body>
    </html>
  );
}

export default function App({ loaderData }: Route.ComponentProps) {
  return (
    <>
      <RunningHead person={loaderData.person} theme={loaderData.theme} />
      <Outlet />
    </>
  );
}

export function ErrorBoundary({ error }: Route.ErrorBoundaryProps) {
  return <Fault error={error} />;
}
