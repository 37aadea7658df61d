import { writeSync } from "node:fs";

/** Loaded before a measured program: tells the measuring one what it took, on a channel of their own. */
process.on("exit", () => {
  const { userCPUTime, systemCPUTime, maxRSS } = process.resourceUsage();
  writeSync(3, `${(userCPUTime + systemCPUTime) / 1000} ${maxRSS}`);
});
