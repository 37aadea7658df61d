import type { Role } from "../models/index.ts";

/** The demo's team: an invented maker of launching gear for rescue boats. */
export const demoTeam = { slug: "varnsund", name: "Varnsund Launching Gear" };

/** The demo's people, all invented. Their passwords are public: `npm start` prints them. */
export const demoPeople: readonly { name: string; email: string; password: string; role: Role }[] = [
  {
    name: "Maren Tolvik",
    email: "maren@varnsund.example",
    password: "drum brake holds the boat",
    role: "modeller",
  },
  {
    name: "Ruben Askeland",
    email: "ruben@varnsund.example",
    password: "two winches share one sheave",
    role: "reviewer",
  },
  {
    name: "Ilse Brandvoll",
    email: "ilse@varnsund.example",
    password: "sealed valve opens at dawn",
    role: "release_keeper",
  },
  {
    name: "Oskar Nymoen",
    email: "oskar@varnsund.example",
    password: "rope stretches under load",
    role: "reader",
  },
  {
    name: "Henrike Solbakk",
    email: "henrike@varnsund.example",
    password: "harbour light turns slowly",
    role: "administrator",
  },
];

/** What a person needs to sign in to the demo; the first is the one to begin with. */
export const demoAccounts = demoPeople.map(({ email, password, role }) => ({
  email,
  password,
  role: role.replace("_", " "),
}));
