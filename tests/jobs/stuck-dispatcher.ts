// A dispatcher that takes a mail and never hears from the server: for the test that kills it.
import { dispatchMail } from "~/jobs/mail.server";

await dispatchMail({
  send: async ({ messageId }) => {
    console.log(messageId);
    await new Promise((resolve) => setTimeout(resolve, 600_000));
  },
});
