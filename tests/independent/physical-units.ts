/** Powers of kg, m, s, A. */
export type Dimension = readonly [kg: number, m: number, s: number, A: number];

const dimension = (kg: number, m: number, s: number, A: number): Dimension => [kg, m, s, A];

/** Effort and flow of some domains that ratios can join. */
export const DOMAINS = {
  electrical: { effort: dimension(1, 2, -3, -1), flow: dimension(0, 0, 0, 1) },
  translation: { effort: dimension(1, 1, -2, 0), flow: dimension(0, 1, -1, 0) },
  rotation: { effort: dimension(1, 2, -2, 0), flow: dimension(0, 0, -1, 0) },
  hydraulic: { effort: dimension(1, -1, -2, 0), flow: dimension(0, 3, -1, 0) },
} as const;

export type DomainName = keyof typeof DOMAINS;

export function over(above: Dimension, below: Dimension): Dimension {
  const [kg, m, s, A] = above.map((power, i) => power - below[i]);
  return [kg, m, s, A];
}

/** ∫ of it in time. */
export function integralOf([kg, m, s, A]: Dimension): Dimension {
  return [kg, m, s + 1, A];
}

/** As `kg*m^2/s^3/A`, in base units, so that a number is its SI value. */
export function unitOf(powers: Dimension): string {
  const named = ["kg", "m", "s", "A"].map((unit, i) => ({ unit, power: powers[i] }));
  const written = ({ unit, power }: { unit: string; power: number }) =>
    Math.abs(power) === 1 ? unit : `${unit}^${Math.abs(power)}`;
  const above = named.filter(({ power }) => power > 0).map(written);
  const below = named.filter(({ power }) => power < 0).map((each) => `/${written(each)}`);
  return `${above.length > 0 ? above.join("*") : "1"}${below.join("")}`;
}

/** What has no dimension is written as a bare number. */
export function quantity(value: number, unit: Dimension): string {
  return unit.every((power) => power === 0) ? `${value}` : `${value} ${unitOf(unit)}`;
}
