import { describe, expect, it } from "vitest";
import { z } from "zod";
import { SCHEMAS } from "../../grammar/writing/published-schemas.ts";

describe("the published schemas", () => {
  it.each(Object.entries(SCHEMAS))(
    "public/schemas/%s.json is what the documents are held against",
    async (name, schema) => {
      // Ours is held to the letter; who reads it must let later fields of the same edition pass.
      const open = z.toJSONSchema(schema, {
        override: ({ jsonSchema }) => {
          delete jsonSchema.additionalProperties;
        },
      });
      const json = { title: `bondwright/${name}@1`, ...open };
      await expect(`${JSON.stringify(json, null, 2)}\n`).toMatchFileSnapshot(
        `../../public/schemas/${name}.json`,
      );
    },
  );
});
