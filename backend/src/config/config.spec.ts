import { resolve } from "node:path";
import { describe, expect, it } from "vitest";
import { ConfigError, DEFAULT_PORT, readConfig } from "./config.js";

const sentencesOf = (environment: Record<string, string>): readonly string[] => {
  try {
    readConfig(environment);
  } catch (error) {
    if (error instanceof ConfigError) return error.sentences;
    throw error;
  }
  return [];
};

describe("the settings", () => {
  it("have defaults for everything: the loopback address, our port, the embedded database, the demo", () => {
    const config = readConfig({});
    expect(config).toMatchObject({ host: "127.0.0.1", port: DEFAULT_PORT, appUrl: null, demo: true });
    expect(config.database).toEqual({ kind: "embedded", folder: resolve(config.dataDir, "database") });
  });

  it("read what is given, an empty variable as absent", () => {
    const config = readConfig({
      HOST: "0.0.0.0",
      PORT: "0",
      APP_URL: "https://heddle.example.org/",
      DATA_DIR: "somewhere",
      DATABASE_URL: "postgresql://u:p@db:5432/heddle",
      DEMO: "off",
    });
    expect(config).toEqual({
      host: "0.0.0.0",
      port: 0,
      appUrl: "https://heddle.example.org",
      dataDir: resolve("somewhere"),
      database: { kind: "postgres", url: "postgresql://u:p@db:5432/heddle" },
      demo: false,
    });
    expect(readConfig({ PORT: "", APP_URL: " " })).toEqual(readConfig({}));
  });

  it("name every problem in one sentence each", () => {
    const sentences = sentencesOf({
      HOST: "not a host",
      PORT: "70000",
      APP_URL: "ftp://x",
      DATABASE_URL: "mysql://x",
      DEMO: "maybe",
    });
    expect(sentences).toHaveLength(5);
    for (const name of ["HOST", "PORT", "APP_URL", "DATABASE_URL", "DEMO"]) {
      expect(sentences.filter((sentence) => sentence.startsWith(name))).toHaveLength(1);
    }
    expect(sentencesOf({ PORT: "80a" })).toEqual([
      "PORT must be a whole number from 0 to 65535; 0 lets the system choose.",
    ]);
    expect(sentencesOf({ APP_URL: "https://example.org/heddle" })).toEqual([
      "APP_URL must be the address alone, without a path: Heddle is served from the root.",
    ]);
  });
});
