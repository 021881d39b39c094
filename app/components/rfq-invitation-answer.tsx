// What an invitation's page shows and asks: the same whether or not the invited address has an account.
import { Form, href } from "react-router";
import type { FormState } from "~/forms/form";
import { Button, LinkButton } from "./button";
import { Instant } from "./figure";
import { CheckField, Field, PostForm, TextAreaField } from "./form";
import { formatDateTime } from "./format";
import { Notice } from "./notice";
import { Section, Split } from "./page";
import { TitleBlock } from "./title-block";

export interface OfferView {
  readonly invitation: string;
  readonly buyerName: string;
  readonly rfqNumber: string;
  readonly rfqTitle: string;
  readonly dueAt: string;
  readonly dueZone: string;
  readonly company: string;
  readonly email: string;
}

/** Who is signed in in this browser. */
export interface ReaderView {
  readonly kind: "buyer" | "supplier";
  readonly name: string;
  readonly email: string;
  readonly organisation: string;
}

export function InvitationBlock({ offer }: { offer: OfferView }) {
  return (
    <TitleBlock
      heading={{ number: offer.rfqNumber, title: offer.rfqTitle }}
      numberLabel="RFQ"
      cells={[{ label: "Status", value: "open" }]}
      facts={[
        { label: "Invited by", value: offer.buyerName },
        { label: `Quotes due, ${offer.dueZone}`, value: <Instant at={offer.dueAt} zone={offer.dueZone} /> },
        { label: "The same in UTC", value: formatDateTime(offer.dueAt, "UTC").replace("+00:00", "UTC") },
        { label: "Invited", value: offer.company },
        { label: "At the address", value: <span className="break-all">{offer.email}</span> },
      ]}
    />
  );
}

interface AnswerProps {
  offer: OfferView;
  reader: ReaderView | null;
  state: FormState | undefined;
}

export function InvitationAnswer({ offer, reader, state }: AnswerProps) {
  const of = (...intents: string[]) => (intents.includes(state?.values.intent ?? "") ? state : undefined);
  return (
    <>
      <p className="mt-9 max-w-170">
        {offer.buyerName} invites {offer.company} to quote. The specification, the measured data asked and the terms are
        shown once the invitation is accepted. Accepting binds to nothing: whether you quote is decided later.
      </p>
      {reader === null ? (
        <Split>
          <NewAccount offer={offer} state={of("accept-new", "accept")} />
          <ExistingAccount />
        </Split>
      ) : (
        <SignedIn offer={offer} reader={reader} state={of("accept", "accept-new")} />
      )}
      <Decline offer={offer} state={of("decline")} />
    </>
  );
}

function NewAccount({ offer, state }: Omit<AnswerProps, "reader">) {
  return (
    <Section title="I am new here" note="You become the first user of your company and accept for it.">
      <PostForm state={state} aria-label="I am new here" className="grid max-w-200 gap-4 tablet:grid-cols-2">
        <input type="hidden" name="invitation" value={offer.invitation} />
        <input type="text" name="username" value={offer.email} autoComplete="username" readOnly hidden />
        <Field
          name="organisationName"
          label="Company"
          defaultValue={offer.company}
          autoComplete="organization"
          required
        />
        <Field name="name" label="Your name" autoComplete="name" required />
        <Field
          name="password"
          label="Password"
          type="password"
          autoComplete="new-password"
          hint="At least 12 characters. A sentence is easier to remember than signs."
          required
        />
        <Field name="passwordAgain" label="Password, again" type="password" autoComplete="new-password" required />
        <div className="col-span-full">
          <Button kind="filled" name="intent" value="accept-new">
            Create the account and accept
          </Button>
        </div>
      </PostForm>
    </Section>
  );
}

function ExistingAccount() {
  return (
    <Section title="I have an account" note="Sign in, then accept for your organisation.">
      <LinkButton to={`${href("/sign-in")}?returnTo=${encodeURIComponent(href("/invitation"))}`}>Sign in</LinkButton>
    </Section>
  );
}

function SignedIn({ offer, reader, state }: AnswerProps & { reader: ReaderView }) {
  if (reader.kind === "buyer")
    return (
      <Section title="Signed in as a buyer">
        <Notice tone="near">
          You are signed in as {reader.name} of {reader.organisation}, a buying organisation. A buyer&apos;s address
          cannot accept an invitation. Sign out to accept with another one.
        </Notice>
        <SignOut />
      </Section>
    );
  const isOther = reader.email !== offer.email;
  return (
    <Section title="Accept" note={`You are signed in as ${reader.name}, ${reader.email}.`}>
      <PostForm state={state} aria-label="Accept" className="flex max-w-170 flex-col gap-4">
        <input type="hidden" name="invitation" value={offer.invitation} />
        {isOther ? (
          <>
            <Notice tone="near">
              The invitation was sent to {offer.email}, not to your address. It can be accepted once, for one
              organisation.
            </Notice>
            <CheckField name="confirmed" label={`Accept it for ${reader.organisation} all the same`} />
          </>
        ) : null}
        <div>
          <Button kind="filled" name="intent" value="accept">
            Accept as {reader.organisation}
          </Button>
        </div>
      </PostForm>
      <SignOut />
    </Section>
  );
}

function SignOut() {
  return (
    <Form method="post" action={href("/sign-out")} className="mt-4">
      <Button kind="plain" busy={false} className="-ml-2">
        Sign out
      </Button>
      <span className="text-13 text-quiet">Then open the mail&apos;s link again.</span>
    </Form>
  );
}

function Decline({ offer, state }: Omit<AnswerProps, "reader">) {
  return (
    <Section title="Decline" className="max-w-170">
      <details open={state !== undefined} className="text-15">
        <summary className="inline-block py-1 text-13 font-semibold text-signal">Decline with a reason</summary>
        <PostForm state={state} aria-label="Decline" className="mt-3 flex flex-col gap-4">
          <input type="hidden" name="invitation" value={offer.invitation} />
          <TextAreaField name="reason" label="Reason, for the buyer" rows={3} required />
          <div>
            <Button name="intent" value="decline">
              Decline the invitation
            </Button>
          </div>
        </PostForm>
      </details>
    </Section>
  );
}

/** The same page for a link that was used, has ended, was revoked, was mistyped, or never was. */
export function InvitationGone({ isSignedIn }: { isSignedIn: boolean }) {
  return (
    <div className="mt-14 max-w-160">
      <h1 className="mb-4 text-24 font-bold">This link is no longer valid</h1>
      <p>
        An invitation&apos;s link works once, and until the RFQ closes. If you have accepted the invitation, sign in to
        see the RFQ. Otherwise ask the buyer for a new link.
      </p>
      <p className="mt-6">
        {isSignedIn ? (
          <LinkButton to="/" kind="filled">
            Open points
          </LinkButton>
        ) : (
          <LinkButton to={href("/sign-in")} kind="filled">
            Sign in
          </LinkButton>
        )}
      </p>
    </div>
  );
}
