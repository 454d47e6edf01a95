/** Puts the server together; `main` and the tests start from here. */
import type { LoggerService, LogLevel } from "@nestjs/common";
import { NestFactory } from "@nestjs/core";
import type { NestExpressApplication } from "@nestjs/platform-express";
import { AppModule } from "./app.module.js";
import { authRoutes } from "./auth/auth.routes.js";
import { makeBetterAuth } from "./auth/better-auth.js";
import { jsonBody } from "./common/body.js";
import { serveDescription } from "./common/openapi.js";
import { OriginPolicy } from "./common/origin-policy.js";
import { servePages, securityHeaders } from "./common/pages.js";
import type { Config } from "./config/config.js";
import { openDataFolder, readSecret } from "./config/data-folder.js";
import { openDatabase } from "./database/database.js";

export interface AppOptions {
  logger?: LoggerService | LogLevel[] | false;
}

/**
 * Opens the data folder and the database and builds the application over them; `listen` it or `init` it.
 * Closing the application closes both.
 * @throws DataFolderError when the folder cannot be used; whatever the database driver throws
 */
export async function createApp(config: Config, options: AppOptions = {}): Promise<NestExpressApplication> {
  const folder = await openDataFolder(config.dataDir);
  try {
    const database = await openDatabase(config.database);
    try {
      const betterAuth = makeBetterAuth(config, database.db, await readSecret(folder));
      const app = await NestFactory.create<NestExpressApplication>(
        AppModule.of({ config, folder, database, betterAuth }),
        // eslint-disable-next-line @typescript-eslint/no-unsafe-class-instance-assignment -- Nest declares its options as a class and asks for any object of that shape
        {
          bodyParser: false,
          abortOnError: false,
          forceCloseConnections: true,
          logger: options.logger ?? ["error", "warn"],
        },
      );
      app.disable("x-powered-by");
      app.setGlobalPrefix("api");
      app.use(securityHeaders);
      app.use("/api", app.get(OriginPolicy).middleware);
      app.use("/api/auth", authRoutes(betterAuth));
      app.use("/api", jsonBody);
      app.use("/api/openapi.json", serveDescription(app));
      servePages(app);
      return app;
    } catch (error) {
      await database.close();
      throw error;
    }
  } catch (error) {
    await folder.release();
    throw error;
  }
}
