import { ConsoleLogger, type LogLevel } from "@nestjs/common";

/** Errors and warnings to the standard error stream, so that the address is the only line of the other one. */
export class StderrLogger extends ConsoleLogger {
  constructor() {
    super({ logLevels: ["fatal", "error", "warn"] });
  }

  protected override printMessages(
    messages: unknown[],
    context?: string,
    logLevel?: LogLevel,
    _stream?: "stdout" | "stderr",
    errorStack?: unknown,
    params?: Record<string, unknown>,
  ): void {
    // A failure to listen comes back to whoever started the server, who says it in one sentence.
    if (context === "NestApplication" && logLevel === "error") return;
    super.printMessages(messages, context, logLevel, "stderr", errorStack, params);
  }
}
