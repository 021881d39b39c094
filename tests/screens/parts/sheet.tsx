// Every part with its states on one sheet, with invented data, as it is looked at beside the design.
import type { FormState } from "~/forms/form";
import { Button, LinkButton } from "~/components/button";
import { Cell, GroupRow, HeadCell, Row, RowHead, Table, TwoLines } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { CheckField, Field, PostForm, SelectField, TextAreaField } from "~/components/form";
import { formatMoney } from "~/components/format";
import { Instant, Level, Margin } from "~/components/figure";
import { Notice } from "~/components/notice";
import { Page, Section, Split } from "~/components/page";
import { ProductNav } from "~/components/product-nav";
import { Sheets } from "~/components/sheets";
import { TitleBlock } from "~/components/title-block";
import { Verdict, verdictTint, type ShownVerdict } from "~/components/verdict-mark";

const links = [
  { to: "/", label: "Open points" },
  { to: "/specifications", label: "Specifications" },
  { to: "/rfqs", label: "RFQs" },
  { to: "/suppliers", label: "Suppliers" },
  { to: "/organisation", label: "Organisation" },
];
const user = { name: "R. Amsel", role: "engineer", organisation: "Northgale Radio" };
const sheets = [
  { to: "/rfqs", label: "Comparison" },
  { to: "/rfqs/invitations", label: "Invitations" },
  { to: "/rfqs/clarifications", label: "Clarifications" },
  { to: "/rfqs/decision", label: "Decision" },
  { to: "/rfqs/history", label: "History" },
];
const facts = [
  { label: "Specification", value: <a href="/specifications/x">SPEC-0042 A</a> },
  { label: "Owner", value: "Rike Amsel" },
  { label: "Decision rule", value: "simple acceptance" },
  { label: "Due", value: <Instant at="2026-11-27T16:00:00.000Z" zone="Europe/Berlin" /> },
  { label: "Quantity", value: "500" },
  { label: "Quotes", value: "5 of 7 invited" },
];
const refused: FormState = {
  values: {
    lower: "1.9200",
    upper: "1980 MHz",
    limit: "0,95 dBm",
    kind: "rejection",
    text: "Typed and kept.",
    agree: "on",
  },
  errors: {
    limit: ["dBm is a power. Give a loss in dB."],
    zone: ["Choose the zone of the due date."],
    form: ["The RFQ was closed while you were typing. Nothing was saved."],
  },
};
const longTitle = "Transmit band-pass for the mast-head unit of the second sector, with the harmonic stopband";

/** A page with the least of everything: no number, no facts, no reader. */
export function PlainSheet() {
  return (
    <>
      <ProductNav links={[]} />
      <Page>
        <TitleBlock heading={{ title: "Sign in" }} />
        <PostForm className="mt-9 grid max-w-100 gap-4">
          <Field name="email" label="E-mail" type="email" autoComplete="username" />
          <Field name="password" label="Password" type="password" autoComplete="current-password" />
          <Button kind="filled">Sign in</Button>
        </PostForm>
      </Page>
    </>
  );
}

/** The sheet; `title` chooses between a title that fits and the longest one allowed. */
export function PartsSheet({ title }: { title: "short" | "long" }) {
  return (
    <>
      <ProductNav links={links} user={user} />
      <Page>
        <TitleBlock
          numberLabel="RFQ"
          heading={{ number: "RFQ-2027-0012", title: title === "short" ? "Transmit band-pass, 500 pieces" : longTitle }}
          cells={[
            { label: "Sheet", value: "4 of 6" },
            title === "short"
              ? { label: "Status", value: "closed" }
              : { label: "Verdict", value: <Verdict verdict="conditional-pass" />, width: "verdict" },
          ]}
          facts={facts}
          actions={
            <>
              <LinkButton to="/export">Export</LinkButton>
              <Button kind="filled">Recommend award</Button>
            </>
          }
        />
        <Sheets items={sheets} />
        <ComparisonSection />
        <Split>
          <MatrixSection />
          <RequirementSection />
        </Split>
        <Split>
          <FormSection />
          <WordsSection />
        </Split>
      </Page>
    </>
  );
}

const quotes: readonly [string, ShownVerdict, number, string, number, string, number][] = [
  ["Fennwick RF", "conditional-pass", 0.01, "64500.00", 12, "121.0000", 4000],
  ["Orrbeck Cavities", "pass", 0.54, "80250.00", 10, "148.5000", 6000],
  ["Tolvane Filters", "fail", -0.062, "58700.00", 9, "112.4000", 2500],
  ["Sablefjord", "not-covered", Number.NaN, "47000.00", 8, "94.0000", 0],
];

function ComparisonSection() {
  return (
    <Section title="Comparison at 500 pieces" note="Scored against revision A." tools={<a href="/csv">Download CSV</a>}>
      <Table label="Comparison" rows="comparison">
        <thead>
          <tr>
            <HeadCell>Supplier</HeadCell>
            <HeadCell>Verdict</HeadCell>
            <HeadCell figure sort={{ to: "?sort=margin", direction: "descending" }}>
              Worst margin
            </HeadCell>
            <HeadCell figure sort={{ to: "?sort=cost" }}>
              Cost, EUR
            </HeadCell>
            <HeadCell figure sort={{ to: "?sort=lead" }}>
              Lead time, wk
            </HeadCell>
          </tr>
        </thead>
        <tbody>
          {quotes.map(([supplier, verdict, margin, cost, weeks, each, nre]) => (
            <Row key={supplier}>
              <RowHead>
                <TwoLines upper={<a href="/quote">{supplier}</a>} lower="5 units, 3 temperatures" />
              </RowHead>
              <Cell>
                <Verdict verdict={verdict} />
              </Cell>
              <Cell figure>
                <TwoLines
                  upper={<Margin value={margin} uncertainty={0.05} unit="dB" verdict={verdict} />}
                  lower="line 2.1 at 1.9200 GHz"
                />
              </Cell>
              <Cell figure>
                <TwoLines upper={<b>{formatMoney(cost)}</b>} lower={`${formatMoney(each)} each, NRE ${nre}`} />
              </Cell>
              <Cell figure>{weeks}</Cell>
            </Row>
          ))}
        </tbody>
      </Table>
    </Section>
  );
}

const units = ["0411", "0412", "0415", "0416", "0420"];
const temperatures = [-30, 25, 70];

function MatrixSection() {
  return (
    <Section title="Compliance of 5 units at 3 temperatures">
      <Table label="Compliance" scroll="inside">
        <thead>
          <tr>
            <HeadCell>Line</HeadCell>
            {units.flatMap((unit) =>
              temperatures.map((temperature, k) => (
                <HeadCell key={`${unit} ${temperature}`} figure parted={k === 0}>
                  {k === 0 ? <span className="block text-left font-semibold text-ink">Unit {unit}</span> : null}
                  {temperature < 0 ? "−30" : temperature} °C
                </HeadCell>
              )),
            )}
          </tr>
        </thead>
        <tbody>
          {["2.1", "2.2", "3.1", "3.2", "3.3", "4.1"].map((line, row) => (
            <Row key={line}>
              <RowHead>{line}</RowHead>
              {units.flatMap((unit, column) =>
                temperatures.map((temperature, k) => {
                  const isWorst = row === 0 && column === 4 && k === 2;
                  const isNear = row === 0 && column === 3 && k === 2;
                  const verdict = isWorst ? "fail" : isNear ? "conditional-fail" : "pass";
                  return (
                    <Cell
                      key={`${unit} ${temperature}`}
                      figure
                      parted={k === 0}
                      className={verdictTint(verdict, !isWorst && !isNear)}
                    >
                      <span className="flex items-center justify-between gap-2 px-1">
                        <Verdict verdict={verdict} size={12} />
                        <Level value={isWorst ? 0.9504 : isNear ? 0.99 : 0.85} limit={0.95} verdict={verdict} />
                      </span>
                    </Cell>
                  );
                }),
              )}
            </Row>
          ))}
        </tbody>
      </Table>
    </Section>
  );
}

function RequirementSection() {
  return (
    <Section title="Requirements" tools={<a href="/paste">Paste table</a>}>
      <Table label="Requirements" rows="two-line">
        <thead>
          <tr>
            <HeadCell>Line</HeadCell>
            <HeadCell>Requirement</HeadCell>
            <HeadCell figure>Limit</HeadCell>
            <HeadCell figure>Margin</HeadCell>
            <HeadCell>
              <span className="sr-only">Verdict</span>
            </HeadCell>
          </tr>
        </thead>
        <tbody>
          <GroupRow number="2" columns={5}>
            Passband
          </GroupRow>
          <RequirementRow line="2.1" name="Insertion loss" limit="max 0.95 dB" margin={-0.25} verdict="fail" selected />
          <RequirementRow line="2.2" name="Ripple" limit="max 0.60 dB" margin={0.06} verdict="conditional-pass" />
          <GroupRow number="3" columns={5}>
            Stopband
          </GroupRow>
          <RequirementRow line="3.1" name="Rejection" limit="min 55 dB" margin={4.18} verdict="pass" />
        </tbody>
      </Table>
    </Section>
  );
}

interface RequirementRowProps {
  line: string;
  name: string;
  limit: string;
  margin: number;
  verdict: ShownVerdict;
  selected?: boolean;
}

function RequirementRow({ line, name, limit, margin, verdict, selected }: RequirementRowProps) {
  return (
    <Row {...(selected ? { selected } : {})}>
      <RowHead>{line}</RowHead>
      <Cell>
        <TwoLines upper={name} lower="1.9200 to 1.9800 GHz" />
      </Cell>
      <Cell figure>{limit}</Cell>
      <Cell figure>
        <Margin value={margin} unit="dB" verdict={verdict} />
      </Cell>
      <Cell>
        <Verdict verdict={verdict} word={false} />
      </Cell>
    </Row>
  );
}

function FormSection() {
  return (
    <Section title="Buttons and fields">
      <div className="mb-6 flex flex-wrap gap-3">
        <Button kind="filled">Release B</Button>
        <Button>Revisions</Button>
        <Button kind="plain">Add line</Button>
        <Button kind="filled" busy>
          Sending
        </Button>
        <Button disabled>Withdraw</Button>
      </div>
      <PostForm state={refused} idempotencyKey="k1" className="grid gap-4 tablet:grid-cols-2">
        <Field name="lower" label="Lower edge" unit="GHz" required />
        <Field name="upper" label="Upper edge" echo="= 1.9800 GHz" />
        <Field name="limit" label="Limit" unit="dB" />
        <SelectField
          name="kind"
          label="Requirement"
          options={[
            { value: "insertion-loss", label: "Insertion loss" },
            { value: "rejection", label: "Rejection" },
          ]}
        />
        <Field name="due" label="Due date" type="date" defaultValue="2026-11-27" hint="At 17:00 in the RFQ's zone." />
        <SelectField name="zone" label="Zone" options={[{ value: "", label: "Choose" }]} />
        <Field name="password" label="Password" type="password" defaultValue="twelve chars" autoComplete="off" />
        <Field name="file" label="Touchstone file" type="file" />
        <TextAreaField name="text" label="Text for the suppliers" rows={3} className="tablet:col-span-2" />
        <CheckField name="agree" label="The figures above are measured on the quoted part" hint="Said once a quote." />
      </PostForm>
    </Section>
  );
}

const verdicts: readonly ShownVerdict[] = [
  "pass",
  "conditional-pass",
  "conditional-fail",
  "fail",
  "not-covered",
  "declared",
  "exception",
];

function WordsSection() {
  return (
    <div className="min-w-0">
      <Section title="Verdict marks">
        <ul className="grid grid-cols-2 gap-2 text-13">
          {verdicts.map((verdict) => (
            <li key={verdict} className="flex items-center gap-4">
              <Verdict verdict={verdict} />
              <Verdict verdict={verdict} size={12} />
            </li>
          ))}
        </ul>
      </Section>
      <Section title="Notices">
        <div className="grid gap-3.5">
          <Notice tone="near">No line limits rejection above 2.14 GHz.</Notice>
          <Notice tone="fail">
            <b>2 lines contradict each other.</b> Lines 2.1 and 3.1 both cover 1.9200 to 1.9300 GHz.
          </Notice>
          <Notice tone="signal">Scored against revision B: 12 of 40 measurements.</Notice>
          <Notice tone="edge">The reference impedance was taken as 50 Ω.</Notice>
        </div>
      </Section>
      <Section title="Empty">
        <Empty
          title="No specification yet"
          sentence="Draw what the filter has to do."
          verb={
            <LinkButton kind="filled" to="/specifications/new">
              Draw a specification
            </LinkButton>
          }
        />
      </Section>
    </div>
  );
}
