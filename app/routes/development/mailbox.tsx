// The mailbox of the local sink: what the product has mailed, to whom.
import { Form, Link } from "react-router";
import { Button } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { Field } from "~/components/form";
import { formatDateTime } from "~/components/format";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { readSinkMailbox } from "~/services/mailbox.server";
import { orNotFound } from "~/services/request.server";
import type { Route } from "./+types/mailbox";

export const meta: Route.MetaFunction = () => [{ title: "Mailbox · Tenderband" }];

export async function loader({ request }: Route.LoaderArgs) {
  const address = new URL(request.url).searchParams.get("to")?.trim() ?? "";
  const mails = orNotFound(await readSinkMailbox(address));
  return {
    address,
    mails: mails.map(({ id, to, subject, date }) => ({ id, to, subject, date: date.toISOString() })),
  };
}

export default function Mailbox({ loaderData }: Route.ComponentProps) {
  return (
    <Page>
      <Section title="Mailbox" className="mt-9">
        <Notice tone="edge">
          Mail of this installation goes to a local sink and nowhere else. Set SMTP_URL to send it; this page is then
          gone.
        </Notice>
        <Form className="mt-4 flex max-w-120 items-end gap-3">
          <Field name="to" label="Recipient" type="email" defaultValue={loaderData.address} className="grow" />
          <Button>Show</Button>
        </Form>
      </Section>
      {loaderData.mails.length === 0 ? (
        <Empty sentence="No mail yet." />
      ) : (
        <Section title={`${loaderData.mails.length} mails`}>
          <Table label="Mails" rows="two-line" stacks>
            <thead>
              <tr>
                <HeadCell>Subject</HeadCell>
                <HeadCell>To</HeadCell>
                <HeadCell>Sent</HeadCell>
              </tr>
            </thead>
            <tbody>
              {loaderData.mails.map((mail) => (
                <Row key={mail.id}>
                  <RowHead>
                    <Link to={`/development/mailbox/${mail.id}`}>{mail.subject}</Link>
                  </RowHead>
                  <Cell data-label="To">{mail.to}</Cell>
                  <Cell data-label="Sent">{formatDateTime(mail.date, "UTC")}</Cell>
                </Row>
              ))}
            </tbody>
          </Table>
        </Section>
      )}
    </Page>
  );
}
