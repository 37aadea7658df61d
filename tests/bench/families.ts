/**
 * Machines of any size, written as an engineer would write them: what speed is measured on. N counts what repeats.
 * The programs in `references/` build the same equations by their own means.
 */
export type Family = "F1" | "F2" | "F3" | "F4" | "F5";

export function familyText(family: Family, n: number): string {
  return ["notation 1", "system Machine {", ...FAMILIES[family](n), "}", ""].join("\n");
}

const FAMILIES: Readonly<Record<Family, (n: number) => string[]>> = {
  F1: rowOfCells,
  F2: ladderWithMotor,
  F3: hydraulicLine,
  F4: resistorGrid,
  F5: gearedInertias,
};

/** N masses in a row, each tied to the next by a spring with a damper, the last to the wall: 2N states. */
function rowOfCells(n: number): string[] {
  return [
    "  param m = 2 kg",
    "  param k = 3 N/m",
    "  param d = 0.5 N*s/m",
    "  input F : N",
    "  Se push e = F",
    "  Sf wall f = 0",
    ...each(n, (i) => [
      `  1 v${i} : translation`,
      `  0 l${i}`,
      `  1 s${i}`,
      `  I m${i} f = p/m`,
      `  C k${i} e = k*q`,
      `  R d${i} e = d*f`,
      `  v${i} -> m${i}`,
      `  v${i} -> l${i} -> s${i} -> k${i}, d${i}`,
      `  l${i} -> ${i === n ? "wall" : `v${i + 1}`}`,
    ]),
    "  push -> v1",
  ];
}

/** N sections of an R-L-C ladder that feed a motor, which turns a load through a gear: 2N + 2 states. */
function ladderWithMotor(n: number): string[] {
  return [
    "  param R = 0.1 ohm",
    "  param L = 1 mH",
    "  param C = 2 µF",
    "  param R_a = 0.35 ohm",
    "  param L_a = 2.1 mH",
    "  param k_m = 0.82 N*m/A",
    "  param J = 0.045 kg*m^2",
    "  param n = 1/28",
    "  param b = 3 N*m*s/rad",
    "  input u : V",
    "  Se supply e = u",
    ...each(n, (i) => [
      `  1 a${i}`,
      `  0 c${i} : electrical`,
      `  R R${i} e = R*f`,
      `  I L${i} f = p/L`,
      `  C C${i} e = q/C`,
      `  ${i === 1 ? "supply" : `c${i - 1}`} -> a${i} -> R${i}, L${i}`,
      `  a${i} -> c${i} -> C${i}`,
    ]),
    "  1 armature",
    "  R R_a",
    "  I L_a",
    "  GY motor out.e = k_m*in.f",
    "  1 shaft : rotation",
    "  I rotor f = p/J",
    "  TF gear out.f = n*in.f",
    "  R load e = b*f",
    "  1 drum : rotation",
    `  c${n} -> armature -> R_a, L_a`,
    "  armature -> motor -> shaft -> rotor",
    "  shaft -> gear -> drum -> load",
  ];
}

/** A pump, N segments of a line with an orifice after each, a cylinder that moves a mass: N + 1 states, stiff. */
function hydraulicLine(n: number): string[] {
  return [
    "  param C_h = 2e-12 m^3/Pa",
    "  param K = 3e-7",
    "  param A = 0.002 m^2",
    "  param m = 120 kg",
    "  param b = 900 N*s/m",
    "  input Q : m^3/s",
    "  Sf pump f = Q",
    ...each(n, (i) => [
      `  0 p${i} : hydraulic`,
      `  1 o${i}`,
      `  C C${i} e = q/C_h`,
      `  R K${i} f = K*sqrt(abs(e)/(1 Pa))*sign(e)*(1 m^3/s)`,
      `  ${i === 1 ? "pump" : `o${i - 1}`} -> p${i} -> C${i}`,
      `  p${i} -> o${i} -> K${i}`,
    ]),
    "  0 chamber : hydraulic",
    "  C oil e = q/C_h",
    "  TF cylinder out.e = A*in.e",
    "  1 rod : translation",
    "  I mass f = p/m",
    "  R seal e = b*f",
    `  o${n} -> chamber -> oil`,
    "  chamber -> cylinder -> rod -> mass, seal",
  ];
}

/** N×N points joined by resistors, a capacitor at each corner, one corner driven: loops all over, 4 states. */
function resistorGrid(n: number): string[] {
  const point = (row: number, column: number) => `n${row}_${column}`;
  const corners = [point(1, 1), point(1, n), point(n, 1), point(n, n)];
  const edge = (name: string, from: string, to: string) => [
    `  1 ${name}`,
    `  R R${name} e = R*f`,
    `  ${from} -> ${name} -> R${name}`,
    `  ${name} -> ${to}`,
  ];
  return [
    "  param R = 10 ohm",
    "  param C = 1 mF",
    "  input I : A",
    "  Sf feed f = I",
    ...each(n, (row) => each(n, (column) => [`  0 ${point(row, column)} : electrical`])),
    ...each(n, (row) =>
      each(n, (column) => [
        ...(column < n ? edge(`h${row}_${column}`, point(row, column), point(row, column + 1)) : []),
        ...(row < n ? edge(`v${row}_${column}`, point(row, column), point(row + 1, column)) : []),
      ]),
    ),
    ...corners.flatMap((corner, i) => [`  C C${i + 1} e = q/C`, `  ${corner} -> C${i + 1}`]),
    `  feed -> ${corners[0]}`,
  ];
}

/** N inertias geared to each other without play: one state, N − 1 stores that follow it. */
function gearedInertias(n: number): string[] {
  return [
    "  param J = 0.02 kg*m^2",
    "  param r = 0.98",
    "  param b = 0.1 N*m*s/rad",
    "  input M : N*m",
    "  Se drive e = M",
    "  R friction e = b*f",
    ...each(n, (i) => [
      `  1 w${i} : rotation`,
      `  I J${i} f = p/J`,
      `  w${i} -> J${i}`,
      ...(i === n ? [] : [`  TF g${i} out.f = r*in.f`, `  w${i} -> g${i} -> w${i + 1}`]),
    ]),
    "  drive -> w1 -> friction",
  ];
}

function each(n: number, lines: (i: number) => string[]): string[] {
  return Array.from({ length: n }, (_, i) => lines(i + 1)).flat();
}
