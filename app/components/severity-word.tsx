import type { Severity } from "../../grammar/diagnostics/finding.ts";

const SIGNS = { error: "✕", warning: "△", note: "○" } as const;
const INK = { error: "text-mistake", warning: "text-warning", note: "text-faded" } as const;

/** How grave a finding is: said by word, sign and ink. */
export function SeverityWord({ severity }: { severity: Severity }) {
  return (
    <span className={`font-semibold ${INK[severity]}`}>
      <span aria-hidden="true">{SIGNS[severity]} </span>
      {severity}
    </span>
  );
}
