// The buying organisation: its people and the policy that awards follow.
import { data, redirect } from "react-router";
import { Button } from "~/components/button";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Field, PostForm, SelectField } from "~/components/form";
import { Notice } from "~/components/notice";
import { Page, Section } from "~/components/page";
import { TitleBlock } from "~/components/title-block";
import { addColleague, readOrganisation } from "~/services/organisation.server";
import { requireRight } from "~/services/request.server";
import { may } from "~/workflow/roles";
import type { Route } from "./+types/organisation";

export const meta: Route.MetaFunction = () => [{ title: "Organisation · Tenderband" }];

export async function loader({ request, context }: Route.LoaderArgs) {
  const person = requireRight(context, request, "read-organisation");
  const added = new URL(request.url).searchParams.get("added") === "1";
  return { ...(await readOrganisation(person)), mayAdd: may(person.role, "manage-users"), added };
}

export async function action({ request, context }: Route.ActionArgs) {
  const person = requireRight(context, request, "manage-users");
  const refused = await addColleague(person, await request.formData());
  return refused ? data(refused, { status: 400 }) : redirect("/organisation?added=1");
}

const RULES = {
  simple: "simple acceptance: pass and conditional pass comply",
  guarded: "guarded acceptance: pass alone complies",
};

export default function Organisation({ loaderData, actionData }: Route.ComponentProps) {
  return (
    <Page>
      <TitleBlock
        heading={{ title: loaderData.name }}
        titleLabel="Organisation"
        facts={[
          { label: "Time zone", value: loaderData.timeZone },
          { label: "Currency", value: loaderData.currency },
          { label: "Decision rule", value: RULES[loaderData.decisionRule as keyof typeof RULES] },
          { label: "Award", value: loaderData.secondPerson ? "approved by a second person" : "one person may approve" },
        ]}
      />
      <Section title="People">
        <Table label="People" rows="two-line" stacks>
          <thead>
            <tr>
              <HeadCell>Name</HeadCell>
              <HeadCell>E-mail</HeadCell>
              <HeadCell>Role</HeadCell>
              <HeadCell>State</HeadCell>
            </tr>
          </thead>
          <tbody>
            {loaderData.people.map((person) => (
              <Row key={person.publicId}>
                <RowHead>{person.name}</RowHead>
                <Cell data-label="E-mail">{person.email}</Cell>
                <Cell data-label="Role">{person.role}</Cell>
                <Cell data-label="State">{person.state}</Cell>
              </Row>
            ))}
          </tbody>
        </Table>
      </Section>
      {loaderData.mayAdd ? (
        <Section
          title="Add a colleague"
          note="A mail with a link lets the person set a password. They are listed once they have."
        >
          {loaderData.added ? (
            <div className="mb-4">
              <Notice tone="signal">The mail is on its way.</Notice>
            </div>
          ) : null}
          <PostForm state={actionData} className="grid max-w-200 gap-4 tablet:grid-cols-3">
            <Field name="name" label="Name" autoComplete="off" required />
            <Field name="email" label="E-mail" type="email" autoComplete="off" required />
            <SelectField
              name="role"
              label="Role"
              options={[
                { value: "engineer", label: "engineer" },
                { value: "purchasing", label: "purchasing" },
                { value: "admin", label: "administrator" },
              ]}
            />
            <div>
              <Button kind="filled">Add and mail the link</Button>
            </div>
          </PostForm>
        </Section>
      ) : null}
    </Page>
  );
}
