/** What a person is in a team. What each may do stands in one table, `app/session/permissions.server.ts`. */
export const roles = ["reader", "modeller", "reviewer", "release_keeper", "administrator"] as const;

export type Role = (typeof roles)[number];
