// One invitation: what the buyer asks, by when, and the specification as drawn.
import { data, redirect } from "react-router";
import { Drawing, wallsFromRequirements } from "~/charts/drawing";
import { Button, LinkButton } from "~/components/button";
import { FactLines } from "~/components/fact-lines";
import { DueDate } from "~/components/figure";
import { PostForm } from "~/components/form";
import { formatNumber } from "~/components/format";
import { COVERAGE_SENTENCE, planFacts } from "~/components/measurement-plan-words";
import { Notice } from "~/components/notice";
import { Page, Section, Split } from "~/components/page";
import { QuoteFacts, type QuoteFact } from "~/components/quote-facts";
import { RequirementTable } from "~/components/requirement-table";
import { formatTemperatureRange, numberedRequirements, requirementLines } from "~/components/requirement-words";
import { DECISION_RULES } from "~/components/rfq-block";
import { quoteSheetAddress } from "~/components/supplier-quote-block";
import { TitleBlock } from "~/components/title-block";
import { SETUP_FIELDS } from "~/forms/setup";
import { formatQuantity } from "~/rf/quantity";
import { startQuote } from "~/services/quotes.server";
import { orNotFound, requireRight } from "~/services/request.server";
import { readSupplierInvitation } from "~/services/supplier-invitation.server";
import type { Route } from "./+types/invitation";

export const meta: Route.MetaFunction = ({ loaderData }) => [{ title: `${loaderData.rfqNumber} · Tenderband` }];

export async function loader({ request, context, params }: Route.LoaderArgs) {
  const person = requireRight(context, request, "answer-invitation");
  return orNotFound(await readSupplierInvitation(person, params.invitationId));
}

export async function action({ request, context, params }: Route.ActionArgs) {
  const person = requireRight(context, request, "write-quote");
  const started = orNotFound(await startQuote(person, params.invitationId));
  if (!started.ok) return data({ values: {}, errors: started.errors }, { status: 400 });
  return redirect(quoteSheetAddress("Data", started.value.quote));
}

type Loaded = Route.ComponentProps["loaderData"];

export default function Invitation({ loaderData, actionData }: Route.ComponentProps) {
  const { specification, refusal, text } = loaderData;
  const label = `${specification.number} ${specification.letter}`;
  return (
    <Page>
      <TitleBlock
        heading={{ number: loaderData.rfqNumber, title: loaderData.title }}
        numberLabel="RFQ"
        cells={[
          { label: "Revision", value: specification.letter },
          { label: "Status", value: loaderData.state },
        ]}
        facts={[
          { label: "Buyer", value: loaderData.buyerName },
          { label: "Specification", value: label },
          { label: "Decision rule", value: DECISION_RULES[loaderData.decisionRule] },
          { label: "Quantity", value: formatNumber(loaderData.quantity, 0) },
          {
            label: "Due",
            value: (
              <DueDate at={loaderData.dueAt} zone={loaderData.dueZone} now={loaderData.now} state={loaderData.state} />
            ),
          },
        ]}
        actions={nextStep(loaderData, actionData)}
      />
      {refusal === null ? null : <Notice className="mt-6">{refusal}</Notice>}
      <Split>
        <Section title={`${label} as drawn`} note={specification.title}>
          <Drawing
            walls={wallsFromRequirements(numberedRequirements(specification.lines))}
            title={`Drawing of ${label}`}
          />
        </Section>
        <Section title="Requirements">
          <RequirementTable lines={requirementLines(specification)} />
        </Section>
      </Split>
      <Split>
        <div className="min-w-0">
          <Section title="What is asked">
            <QuoteFacts label="What is asked" rows={asked(loaderData)} />
          </Section>
          <Section
            title="Measurement plan"
            note={loaderData.measurementPlan.sweeps === undefined ? undefined : COVERAGE_SENTENCE}
          >
            <QuoteFacts label="Measurement plan" rows={planned(loaderData)} />
          </Section>
          {text === null ? null : (
            <Section title="Text of the buyer">
              <p className="max-w-170 whitespace-pre-line">{text}</p>
            </Section>
          )}
        </div>
        <Section title="Assumed setup" note="Takes the place of what you do not state of your measurement.">
          <QuoteFacts label="Assumed setup" rows={setupRows(loaderData)} figures />
        </Section>
      </Split>
    </Page>
  );
}

/** Nothing where no quote was begun and none can be. */
function nextStep({ quote, refusal }: Loaded, state: Route.ComponentProps["actionData"]) {
  if (quote !== null)
    return (
      <LinkButton kind={refusal === null ? "filled" : "outlined"} to={quoteSheetAddress("Data", quote.publicId)}>
        {refusal === null ? "Continue quote" : "Open quote"}
      </LinkButton>
    );
  if (refusal !== null) return undefined;
  return (
    <PostForm state={state}>
      <Button kind="filled" name="intent" value="start">
        Start quote
      </Button>
    </PostForm>
  );
}

const asked = ({ breaks, quantity, currency, decisionRule }: Loaded): QuoteFact[] => [
  ["Unit price at", breaks.map((count) => formatNumber(count, 0)).join(" · ")],
  ["Compared at", `${formatNumber(quantity, 0)} pieces, in ${currency}`],
  ["Decision rule", RULES[decisionRule]],
];

function planned({ unitsAsked, unitsOverRange, measurementPlan, specification }: Loaded): QuoteFact[] {
  const { temperatureRange: range, ambient, lowestTestFrequency } = specification;
  return [
    ["Units measured", `${unitsAsked} in all, each with its serial and its own files`],
    [
      "Over temperature",
      range === null
        ? `ambient only, ${formatQuantity(ambient, "temperature")}`
        : `${unitsOverRange} at ${formatQuantity(ambient, "temperature")} and at both ends of ${formatTemperatureRange(range)}`,
    ],
    ...planFacts(measurementPlan, lowestTestFrequency).map(([label, lines]): QuoteFact => [
      label,
      <FactLines key={label} lines={lines} />,
    ]),
    ["Files", "two-port Touchstone, at most 64 MiB each, 200 in all"],
  ];
}

const RULES = {
  simple: "simple acceptance: pass and conditional pass comply",
  guarded: "guarded acceptance: pass alone complies",
} as const;

const setupRows = ({ assumedSetup }: Loaded): QuoteFact[] =>
  SETUP_FIELDS.flatMap(({ field, label, kind, unit }): QuoteFact[] => {
    const value = assumedSetup[field];
    if (value === undefined) return [];
    const floor = field === "noiseFloor" ? `, ${assumedSetup.noiseFloorKind ?? "peak"}` : "";
    return [[label, `${formatQuantity(value, kind, kind === "plain" ? { unit } : {})}${floor}`]];
  });
