// Checked files together: line by line the verdict a quote of them would get, and what the lot leaves out.
import { complies } from "~/rf/verdict";
import type { CheckFrame } from "~/rf/check-frame";
import type { CheckedLot } from "~/workers/check-messages";
import type { CheckState } from "./check-queue";
import { complianceWords, counted, leftOutWords, lotResultLines, setupWords, unitsWords } from "./check-words";
import { QuoteResultTable } from "./quote-result-table";
import { Verdict, VerdictMark, verdictTint } from "./verdict-mark";

export function CheckLot({ state, frame }: { state: CheckState; frame: CheckFrame }) {
  const { lot, lotRefusal, isScoringLot, items } = state;
  const leftOut = leftOutWords(items);
  if (!lot && lotRefusal === null && !isScoringLot && leftOut.length === 0) return null;
  return (
    <section aria-label="Checked files together" className="pt-6 text-13">
      <h3>{lot ? `Together, as a quote of ${lotWords(lot)} would score` : "Together"}</h3>
      {isScoringLot ? (
        <p role="status" className="text-quiet">
          Scoring the files together…
        </p>
      ) : null}
      {lotRefusal === null ? null : <p className="text-bare">{lotRefusal}</p>}
      {lot ? <Scored lot={lot} frame={frame} /> : null}
      {leftOut.map((sentence) => (
        <p key={sentence} className="mt-2 text-bare">
          {sentence}
        </p>
      ))}
    </section>
  );
}

const lotWords = ({ ids }: CheckedLot): string =>
  ids.length === 1 ? "this file alone" : `these ${ids.length} files alone`;

function Scored({ lot, frame }: { lot: CheckedLot; frame: CheckFrame }) {
  return (
    <>
      <p className="flex flex-wrap items-center gap-x-5 gap-y-1">
        <Verdict verdict={lot.verdict} />
        <span>{complianceWords(lot, frame)}</span>
        <span className="text-quiet">{unitsWords(lot, frame)}</span>
      </p>
      <LineStrip lot={lot} frame={frame} />
      <details>
        <summary className="inline-block min-h-6 py-1 font-semibold text-signal">
          {`Figures of all ${counted(lot.lines.length, "line")}`}
        </summary>
        <div className="pt-2">
          <QuoteResultTable lines={lotResultLines(lot, frame)} decisionRule={frame.decisionRule} />
        </div>
      </details>
      {lot.notes.map(({ message }, index) => (
        <p key={index} className="mt-1 max-w-200 text-12 text-quiet">
          {message}
        </p>
      ))}
      <p className="mt-1 text-12 text-quiet">{setupWords(frame)}</p>
    </>
  );
}

/** Every line's number over its mark. */
function LineStrip({ lot, frame }: { lot: CheckedLot; frame: CheckFrame }) {
  const numbers = new Map(frame.lines.map(({ lineKey, lineNumber }) => [lineKey, lineNumber]));
  return (
    <ol aria-label="Verdict of each line" className="mt-3 mb-2 flex flex-wrap gap-y-2">
      {lot.lines.map(({ lineKey, verdict }) => (
        <li
          key={lineKey}
          className={`flex w-14 flex-col items-center -mr-px border border-rule py-1 ${verdictTint(verdict, complies(verdict, frame.decisionRule))}`}
        >
          <span className="text-12 tabular-nums">{numbers.get(lineKey)}</span>
          <VerdictMark verdict={verdict} />
        </li>
      ))}
    </ol>
  );
}
