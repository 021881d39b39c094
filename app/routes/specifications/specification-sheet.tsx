// What the page of a specification and the page of one revision share: facts, drawing, table, revisions, use.
import { useMemo } from "react";
import { href, Link } from "react-router";
import { Drawing, wallsFromRequirements } from "~/charts/drawing";
import { Cell, HeadCell, Row, RowHead, Table } from "~/components/data-table";
import { Empty } from "~/components/empty";
import { Instant } from "~/components/figure";
import { Notice } from "~/components/notice";
import { Section, Split } from "~/components/page";
import { RequirementTable } from "~/components/requirement-table";
import {
  formatImpedances,
  formatTemperatureRange,
  impedanceOffsetWords,
  numberedRequirements,
  requirementLines,
  shortFrequency,
  startsAtDc,
  type WordedSpecification,
} from "~/components/requirement-words";
import type { TitleBlockCell } from "~/components/title-block";
import { proposeLowestTestFrequency } from "~/forms/specification";
import { measuredRequirements } from "~/rf/line-definition";
import type { RevisionState } from "~/workflow/specification";

interface ShownRevision extends WordedSpecification {
  readonly publicId: string;
  readonly number: string;
  readonly letter: string;
  readonly status: RevisionState;
  readonly ownerName: string | null;
  readonly releasedAt: string | null;
  readonly savedAt: string;
}

/** Row 2 of the title block. */
export function revisionFacts(view: ShownRevision, used: number, zone: string): TitleBlockCell[] {
  const { temperatureRange, ambient, lowestTestFrequency } = view;
  const temperature = temperatureRange ? formatTemperatureRange(temperatureRange) : `ambient, ${ambient} °C`;
  return [
    { label: "Owner", value: view.ownerName ?? "" },
    { label: "Impedances", value: formatImpedances(view.impedances) },
    { label: "Temperature", value: temperature },
    {
      label: "Lowest test frequency",
      value: lowestTestFrequency === null ? "none" : shortFrequency(lowestTestFrequency),
    },
    view.releasedAt === null
      ? { label: "Saved", value: <Instant at={view.savedAt} zone={zone} /> }
      : { label: "Released", value: <Instant at={view.releasedAt} zone={zone} /> },
    {
      label: "Used in",
      value: used === 0 ? "nothing yet" : <a href="#used-in">{used === 1 ? "1 RFQ" : `${used} RFQs`}</a>,
    },
  ];
}

/** Drawing and requirement table, side by side from 1200 px on. */
export function SpecificationSheet({ view }: { view: ShownRevision }) {
  const walls = useMemo(() => wallsFromRequirements(numberedRequirements(view.lines)), [view.lines]);
  const offset = impedanceOffsetWords(view.impedances);
  return (
    <Split>
      <Section title="Drawing">
        {walls.length === 0 ? (
          <Empty sentence="No line of this revision draws a wall yet." />
        ) : (
          <Drawing walls={walls} title={`Drawing of ${view.number} ${view.letter}`} />
        )}
        {offset === null ? null : <Notice className="mt-3">{offset}</Notice>}
      </Section>
      <Section title="Requirements">
        <RequirementTable lines={requirementLines(view)} />
        <TestFrequencyNotice view={view} />
      </Section>
    </Split>
  );
}

/** A band from DC is tested from somewhere: a draft that does not say from where is told what is usual. */
function TestFrequencyNotice({ view }: { view: ShownRevision }) {
  if (view.status !== "draft" || view.lowestTestFrequency !== null || !startsAtDc(view.lines)) return null;
  const proposal = proposeLowestTestFrequency(measuredRequirements(view.lines));
  if (proposal === null) return null;
  return (
    <Notice tone="near" className="mt-4">
      A band starts at DC and no lowest test frequency is given: sweeps have to reach 0 Hz. {shortFrequency(proposal)}{" "}
      would be usual.
    </Notice>
  );
}

interface RevisionRow {
  readonly letter: string;
  readonly status: RevisionState;
  readonly savedAt: string;
  readonly releasedAt: string | null;
  readonly releasedByName: string | null;
  readonly rfqCount: number;
}

export function Revisions(props: { publicId: string; revisions: readonly RevisionRow[]; shown: string; zone: string }) {
  const { publicId: specificationId, revisions, shown, zone } = props;
  return (
    <Section title="Revisions">
      <Table label="Revisions" stacks className="whitespace-nowrap">
        <thead>
          <tr>
            <HeadCell>Revision</HeadCell>
            <HeadCell>Status</HeadCell>
            <HeadCell>Saved</HeadCell>
            <HeadCell>Released</HeadCell>
            <HeadCell>By</HeadCell>
            <HeadCell figure>RFQs</HeadCell>
          </tr>
        </thead>
        <tbody>
          {revisions.map((revision) => (
            <Row key={revision.letter} selected={revision.letter === shown}>
              <RowHead>
                <Link
                  to={href("/specifications/:specificationId/revisions/:letter", {
                    specificationId,
                    letter: revision.letter,
                  })}
                >
                  {revision.letter}
                </Link>
              </RowHead>
              <Cell className="max-tablet:text-right">{revision.status}</Cell>
              <Cell data-label="Saved">
                <Instant at={revision.savedAt} zone={zone} />
              </Cell>
              <Cell data-label="Released">
                {revision.releasedAt === null ? "–" : <Instant at={revision.releasedAt} zone={zone} />}
              </Cell>
              <Cell data-label="By">{revision.releasedByName ?? ""}</Cell>
              <Cell figure data-label="RFQs">
                {revision.rfqCount}
              </Cell>
            </Row>
          ))}
        </tbody>
      </Table>
    </Section>
  );
}

interface RfqRow {
  readonly publicId: string;
  readonly number: string;
  readonly title: string;
  readonly letter: string;
  readonly state: string;
  readonly dueAt: string;
}

export function UsedIn({ rfqs, zone }: { rfqs: readonly RfqRow[]; zone: string }) {
  if (rfqs.length === 0) return null;
  return (
    <Section title="Used in" id="used-in">
      <Table label="RFQs on this specification" stacks className="tablet:whitespace-nowrap">
        <thead>
          <tr>
            <HeadCell>RFQ</HeadCell>
            <HeadCell>Title</HeadCell>
            <HeadCell>Revision</HeadCell>
            <HeadCell>Status</HeadCell>
            <HeadCell>Due</HeadCell>
          </tr>
        </thead>
        <tbody>
          {rfqs.map((rfq) => (
            <Row key={rfq.publicId}>
              <RowHead>
                <Link to={href("/rfqs/:rfqId", { rfqId: rfq.publicId })}>{rfq.number}</Link>
              </RowHead>
              <Cell className="max-tablet:order-1 max-tablet:col-span-2">{rfq.title}</Cell>
              <Cell className="max-tablet:order-3 max-tablet:text-right" data-label="Revision">
                {rfq.letter}
              </Cell>
              <Cell className="max-tablet:text-right">{rfq.state}</Cell>
              <Cell className="max-tablet:order-2" data-label="Due">
                <Instant at={rfq.dueAt} zone={zone} />
              </Cell>
            </Row>
          ))}
        </tbody>
      </Table>
    </Section>
  );
}
