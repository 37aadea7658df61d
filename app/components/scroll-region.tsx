import type { ReactNode } from "react";

/** A stretch of code or drawing that scrolls sideways by itself; reachable by keyboard, so that the arrows move it. */
export function ScrollRegion({
  label,
  className,
  children,
}: {
  label: string;
  className: string;
  children: ReactNode;
}) {
  return (
    // biome-ignore lint/a11y/noNoninteractiveTabindex: what scrolls must be reachable without a pointer
    <section className={`overflow-x-auto ${className}`} aria-label={label} tabIndex={0}>
      {children}
    </section>
  );
}
