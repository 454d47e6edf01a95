/** The server's process: settings, start, one line with the address, and an orderly end. */
import "reflect-metadata";
import { createApp } from "./app.js";
import { StderrLogger } from "./common/stderr-logger.js";
import { ConfigError, readConfig, type Config } from "./config/config.js";
import { DataFolderError } from "./config/data-folder.js";
import { listenError } from "./config/listen-error.js";

const EXIT = { cannotStart: 1, badSettings: 2 } as const;

const say = (sentence: string): void => void process.stderr.write(`${sentence}\n`);

function settings(): Config {
  try {
    return readConfig(process.env);
  } catch (error) {
    if (!(error instanceof ConfigError)) throw error;
    for (const sentence of error.sentences) say(sentence);
    process.exit(EXIT.badSettings);
  }
}

function sentenceOf(error: unknown, config: Config): string {
  if (error instanceof DataFolderError) return error.message;
  return (
    listenError(error, config) ?? (error instanceof Error ? (error.stack ?? error.message) : String(error))
  );
}

async function start(config: Config): Promise<void> {
  const app = await createApp(config, { logger: new StderrLogger() });
  let ending = false;
  const end = (signal: NodeJS.Signals): void => {
    // A second signal ends the process at once.
    if (ending) process.exit(EXIT.cannotStart);
    ending = true;
    // Nothing new comes in while what goes on is brought to its end.
    app.getHttpServer().close();
    app
      .close()
      .then(() => process.exit(0))
      .catch((error: unknown) => {
        say(`After ${signal} the server could not end in good order: ${String(error)}`);
        process.exit(EXIT.cannotStart);
      });
  };
  process.on("SIGTERM", end);
  process.on("SIGINT", end);
  try {
    await app.listen(config.port, config.host);
  } catch (error) {
    await app.close();
    throw error;
  }
  const url = new URL(await app.getUrl());
  process.stdout.write(`Heddle is ready at ${config.appUrl ?? url.origin}\n`);
}

const config = settings();
start(config).catch((error: unknown) => {
  say(sentenceOf(error, config));
  process.exit(EXIT.cannotStart);
});
