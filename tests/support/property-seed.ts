import fc from "fast-check";

/**
 * Properties draw the same cases at every run, so that a red build is the change's own doing;
 * `npm run test:full` draws new ones each time and prints the seed of what it finds.
 */
if (process.env.FULL !== "1") fc.configureGlobal({ seed: 20261201 });
