// One's own account: who one is here, and the sessions that are open.
import { Form, Link, redirect } from "react-router";
import { Button } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { formatDateTime } from "~/components/format";
import { Page, Section } from "~/components/page";
import { TitleBlock } from "~/components/title-block";
import { endAllSessions, readOpenSessions } from "~/services/account.server";
import { requirePerson } from "~/services/request.server";
import type { Route } from "./+types/account";

export const meta: Route.MetaFunction = () => [{ title: "Account · Tenderband" }];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requirePerson(context, request);
  const { name, email, role, organisationName, timeZone } = person;
  return { name, email, role, organisationName, timeZone, sessions: await readOpenSessions(person) };
}

export async function action({ request, context }: Route.ActionArgs) {
  const person = requirePerson(context, request);
  await endAllSessions(person);
  return redirect("/sign-in");
}

export default function Account({ loaderData }: Route.ComponentProps) {
  const { sessions, timeZone } = loaderData;
  return (
    <Page>
      <TitleBlock
        heading={{ title: loaderData.name }}
        titleLabel="Account"
        facts={[
          { label: "E-mail", value: loaderData.email },
          { label: "Organisation", value: loaderData.organisationName },
          { label: "Role", value: loaderData.role },
          { label: "Time zone", value: timeZone },
        ]}
      />
      <Section
        title="Open sessions"
        note="A session ends after 12 hours without use, and after 7 days in any case."
        tools={
          <Form method="post">
            <Button>End all sessions</Button>
          </Form>
        }
      >
        <Table label="Open sessions" rows="two-line" stacks>
          <thead>
            <tr>
              <HeadCell>Last seen</HeadCell>
              <HeadCell>Begun</HeadCell>
              <HeadCell>From</HeadCell>
              <HeadCell>Browser</HeadCell>
            </tr>
          </thead>
          <tbody>
            {sessions.map((session) => (
              <Row key={session.key}>
                <RowHead>{formatDateTime(session.lastSeen, timeZone)}</RowHead>
                <Cell data-label="Begun">{formatDateTime(session.begun, timeZone)}</Cell>
                <Cell data-label="From">{session.ip}</Cell>
                <Cell data-label="Browser">{session.browser}</Cell>
              </Row>
            ))}
          </tbody>
        </Table>
      </Section>
      <Section title="Password">
        <p className="text-13">
          <Link to="/forgotten-password">Ask for a link</Link> that sets a new password. All sessions end when it is
          used.
        </p>
      </Section>
    </Page>
  );
}
