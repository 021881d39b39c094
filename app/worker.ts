// The worker process: sends mail, scores quotes, scores them again where core or revision changed, closes RFQs that are due.
import { createSender } from "~/emails/sender";
import { config } from "./config.server";
import { runClosingLoop } from "./jobs/closing.server";
import { runMailLoop } from "./jobs/mail.server";
import { runRescoringLoop, runScoringLoop } from "./jobs/scoring.server";
import { log } from "./services/log.server";

const { smtpUrl, mailFrom } = config();
const sender = createSender({ smtpUrl, from: mailFrom });
const stop = new AbortController();
const end = () => stop.abort();
process.on("SIGTERM", end);
process.on("SIGINT", end);
process.on("disconnect", end);
process.on("uncaughtException", (error) => log.error({ err: error }, "uncaught"));
process.on("unhandledRejection", (error) => log.error({ err: error }, "unhandled"));

log.info("worker started");
await Promise.all([
  runMailLoop({ send: (mail) => sender.send(mail), signal: stop.signal, report: (message) => log.warn(message) }),
  runScoringLoop({ signal: stop.signal }),
  runRescoringLoop({ signal: stop.signal }),
  runClosingLoop({ signal: stop.signal }),
]);
process.exit(0);
