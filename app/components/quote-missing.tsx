// What keeps a quote from being submitted, each with the sheet it is put right on.
import { Link } from "react-router";
import type { FieldErrors } from "~/forms/form";
import { isDataField, SETUP_FIELDS } from "~/forms/setup";
import { Notice } from "./notice";
import type { DeclaredLineFacts } from "./quote-declaration-fields";
import { quoteSheetAddress, type SupplierQuoteSheet } from "./supplier-quote-block";

interface QuoteMissingProps {
  quoteId: string;
  /** Of `reviewQuote`: fields by name, the files under `data`. */
  errors: FieldErrors;
  declared: readonly DeclaredLineFacts[];
}

interface MissingGroup {
  readonly sheet: SupplierQuoteSheet;
  readonly sentences: readonly string[];
}

export function QuoteMissing({ quoteId, errors, declared }: QuoteMissingProps) {
  const groups = missingGroups(errors, declared);
  if (groups.length === 0) return null;
  return (
    <Notice tone="fail" className="mt-6">
      <p className="font-semibold">Before you can submit</p>
      {groups.map(({ sheet, sentences }) => (
        <div key={sheet} className="mt-1">
          <Link to={`${quoteSheetAddress(sheet, quoteId)}?check=1`}>{sheet}</Link>
          <ul>
            {sentences.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        </div>
      ))}
    </Notice>
  );
}

function missingGroups(errors: FieldErrors, declared: readonly DeclaredLineFacts[]): MissingGroup[] {
  const numbers = new Map(declared.map(({ lineKey, lineNumber, name }) => [lineKey, `${lineNumber} ${name}`]));
  const groups: Record<"Data" | "Terms" | "Declarations", string[]> = { Data: [], Terms: [], Declarations: [] };
  for (const [name, sentences = []] of Object.entries(errors)) {
    if (name === "form") continue;
    const lineKey = /^declarations\.([^.]+)\./.exec(name)?.[1];
    const text = sentences.join(" ");
    if (lineKey !== undefined) groups.Declarations.push(`${numbers.get(lineKey) ?? lineKey}: ${text}`);
    else if (name === "data") groups.Data.push(...sentences);
    else if (isDataField(name)) groups.Data.push(`${fieldWords(name)}${text}`);
    else groups.Terms.push(`${fieldWords(name)}${text}`);
  }
  return (["Data", "Terms", "Declarations"] as const).flatMap((sheet) =>
    groups[sheet].length > 0 ? [{ sheet, sentences: groups[sheet] }] : [],
  );
}

const FIELDS: Readonly<Record<string, string>> = {
  nre: "NRE",
  leadFirstDays: "Lead time, first units",
  leadVolumeDays: "Lead time, volume",
  validUntil: "Valid to",
  minimumQuantity: "Minimum quantity",
  orderMultiple: "Order multiple",
  incoterms: "Incoterms",
  place: "Named place",
  paymentTerms: "Payment terms",
  remarks: "Remarks",
  basis: "Basis of the data",
  "instrument.analyser": "Analyser",
  "instrument.calibration": "Calibration method",
  "instrument.calibratedOn": "Calibrated on",
  "drift.ppmPerKelvin": "Temperature drift",
  "drift.lossPerKelvin": "Rise of the resistance",
};

const setupLabel = (name: string): string =>
  SETUP_FIELDS.find(({ field }) => name === `setup.${field}`)?.label ?? "Setup";

function fieldWords(name: string): string {
  const price = /^prices\.(\d+)$/.exec(name)?.[1];
  if (price !== undefined) return `Unit price at ${price}: `;
  const words = FIELDS[name] ?? (name.startsWith("setup.") ? setupLabel(name) : undefined);
  return words === undefined ? "" : `${words}: `;
}
