import type { ReactNode } from "react";

interface SectionProps {
  readonly title: string;
  readonly count?: number;
  readonly tools?: ReactNode;
  readonly children: ReactNode;
}

export function idOf(title: string): string {
  return title.toLowerCase().replaceAll(/[^a-z]+/g, "-");
}

/** A part of the right page under a hairline, with its own place in the address. */
export function Section({ title, count, tools, children }: SectionProps) {
  const id = idOf(title);
  return (
    <section aria-labelledby={id} className="part">
      <header>
        <h2 id={id} tabIndex={-1}>
          {title}
          {count !== undefined && <span className="count">{count}</span>}
        </h2>
        {tools !== undefined && <div className="tools">{tools}</div>}
      </header>
      {children}
    </section>
  );
}
