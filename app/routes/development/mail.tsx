// One mail of the local sink, as HTML in a sandbox and as text.
import { Link } from "react-router";
import { formatDateTime } from "~/components/format";
import { Page, Section } from "~/components/page";
import { readSinkMailbox } from "~/services/mailbox.server";
import { orNotFound } from "~/services/request.server";
import type { Route } from "./+types/mail";

export const meta: Route.MetaFunction = () => [{ title: "Mail · Tenderband" }];

export async function loader({ params }: Route.LoaderArgs) {
  const mails = orNotFound(await readSinkMailbox());
  const mail = orNotFound(mails.find(({ id }) => id === params.mailId));
  const { from, to, subject, text, html, date, links } = mail;
  return { from, to, subject, text, html, date: date.toISOString(), links };
}

export default function Mail({ loaderData: mail }: Route.ComponentProps) {
  return (
    <Page>
      <Section
        title={mail.subject}
        note={`From ${mail.from} to ${mail.to}, ${formatDateTime(mail.date, "UTC")}`}
        tools={<Link to="/development/mailbox">All mails</Link>}
      >
        <ul className="mb-4 text-13">
          {mail.links.map((link) => (
            <li key={link}>
              <a href={link} className="break-all">
                {link}
              </a>
            </li>
          ))}
        </ul>
        <iframe
          title="The mail as HTML"
          sandbox=""
          srcDoc={mail.html}
          className="h-200 w-full border border-edge bg-leaf"
        />
      </Section>
      <Section title="As text">
        <pre className="overflow-x-auto text-13 whitespace-pre-wrap">{mail.text}</pre>
      </Section>
    </Page>
  );
}
