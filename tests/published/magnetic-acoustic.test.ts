import { describe, expect, it } from "vitest";
import { derived, expectPublished } from "./derived.ts";

/**
 * A. E. Fitzgerald, C. Kingsley, S. D. Umans: Electric Machinery, 6th edition, McGraw-Hill 2003, chapter 1 (magnetic
 * circuits); R. W. Buntenbach's analogue of magnetomotive force and rate of flux, as in Karnopp, Margolis, Rosenberg,
 * chapter 11. Recalled from memory.
 */
describe("magnetic circuits", () => {
  it("coil on a core with a gap: L*i' = u - R*i with L = N^2/(R_core + R_gap)", () => {
    const found = derived(`
      param N = 200
      param R = 3 ohm
      param S_c = 1e6 A/Wb
      param S_g = 4e6 A/Wb
      input u : V
      Se supply e = u
      1  mesh : electrical
      R  R
      GY coil out.e = N*in.f
      1  yoke : magnetic
      C  core e = S_c*q
      C  gap  e = S_g*q
      supply -> mesh -> R
      mesh -> coil -> yoke -> core, gap
      output i = mesh.f
    `);
    const rate = "(u - R*(S_c*core.q + S_g*gap.q)/N)/N";
    expectPublished(found, {
      rates: { "core.q": rate, "gap.q": rate },
      outputs: { i: "(S_c*core.q + S_g*gap.q)/N" },
    });
    expect(found.findings).toEqual([]);
  });

  it("transformer by its core: magnetising flux, eddy currents and the load on the other winding", () => {
    // One flux through both windings; its eddy currents take the force G*dflux/dt: u_1 = R_1*i_1 + N_1*flux',
    // N_1*i_1 - N_2*i_2 = S*flux + G*flux', N_2*flux' = R_2*i_2.
    const found = derived(`
      param N_1 = 100
      param N_2 = 40
      param R_1 = 2 ohm
      param R_2 = 7 ohm
      param S = 1e5 A/Wb
      param G = 30 A*s/Wb
      input u : V
      Se supply e = u
      1  first : electrical
      R  R_1
      GY winding_1 out.e = N_1*in.f
      1  limb : magnetic
      C  core e = S*q
      R  eddy e = G*f
      GY winding_2 in.e = N_2*out.f
      1  second : electrical
      R  R_2
      supply -> first -> R_1
      first -> winding_1 -> limb -> core, eddy
      limb -> winding_2 -> second -> R_2
      output i_2 = second.f
    `);
    const rate = "(N_1*u/R_1 - S*core.q)/(G + N_1^2/R_1 + N_2^2/R_2)";
    expectPublished(found, { rates: { "core.q": rate }, outputs: { i_2: `N_2*${rate}/R_2` } });
  });
});

/**
 * L. L. Beranek: Acoustics, McGraw-Hill 1954 (acoustic mass rho*l/S, compliance V/(rho*c^2); loudspeakers in closed
 * boxes). Recalled from memory.
 */
describe("acoustics", () => {
  it("Helmholtz resonator: w^2 = c^2*S/(V*l)", () => {
    const found = derived(`
      param rho = 1.2 kg/m^3
      param c = 343 m/s
      param S = 3 cm^2
      param l = 4 cm
      param V = 1 L
      param R = 2e4 Pa*s/m^3
      input p_out : Pa
      Se sound e = p_out
      1  neck : acoustic
      I  air  f = p*S/(rho*l)
      R  R
      C  bottle e = rho*c^2*q/V
      sound -> neck -> air, R, bottle
      expect mode(1 Hz*(c*sqrt(S/(V*l))*1 s)/(2*pi)) within 0.0001 %
    `);
    expectPublished(found, {
      rates: {
        "air.p": "p_out - R*S*air.p/(rho*l) - rho*c^2*bottle.q/V",
        "bottle.q": "S*air.p/(rho*l)",
      },
    });
  });

  it("loudspeaker in a closed box: the box stiffens the cone by rho*c^2*S^2/V", () => {
    const found = derived(`
      param R_e = 6 ohm
      param Bl = 7 N/A
      param m = 20 g
      param k = 900 N/m
      param S_d = 200 cm^2
      param V = 30 L
      param rho = 1.2 kg/m^3
      param c = 343 m/s
      input u : V
      Se amplifier e = u
      1  mesh : electrical
      R  R_e
      GY motor out.e = Bl*in.f
      1  cone : translation
      I  m
      C  suspension e = k*q
      TF diaphragm out.f = S_d*in.f
      C  box : acoustic e = rho*c^2*q/V
      amplifier -> mesh -> R_e
      mesh -> motor -> cone -> m, suspension
      cone -> diaphragm -> box
      start suspension.q = 0 m
      output x = suspension.q
      expect mode(1 Hz*(sqrt((k + rho*c^2*S_d^2/V)/m)*1 s)/(2*pi)) within 0.0001 %
    `);
    expectPublished(found, {
      rates: {
        "m.p": "Bl*(u - Bl*m.p/m)/R_e - k*suspension.q - S_d*rho*c^2*box.q/V",
        "suspension.q": "m.p/m",
        "box.q": "S_d*m.p/m",
      },
      outputs: { x: "suspension.q" },
    });
  });
});
