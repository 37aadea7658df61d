/** Loaded into the server before anything else: it ends with the program that started it, even when that was killed. */
process.once("disconnect", () => process.exit(0));
