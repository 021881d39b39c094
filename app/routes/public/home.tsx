// The public page: what the product does; somebody signed in goes on to the open points.
import { redirect } from "react-router";
import { LinkButton } from "~/components/button";
import { Page } from "~/components/page";
import { currentPerson } from "~/services/request.server";
import type { Route } from "./+types/home";

export const meta: Route.MetaFunction = () => [
  { title: "Tenderband" },
  { name: "description", content: "Filter specifications, quotes and measured data, scored and compared." },
];

export function loader({ context }: Route.LoaderArgs) {
  const person = currentPerson(context);
  if (person) throw redirect(person.organisationKind === "buyer" ? "/open-points" : "/supplier/open-points");
  return null;
}

const STEPS = [
  {
    title: "Draw the mask",
    text: "Passbands, stopbands, match and temperature, as limits everybody reads the same way.",
  },
  {
    title: "Ask for quotes",
    text: "Manufacturers are invited by mail. None of them learns who else was asked.",
  },
  {
    title: "Score what was measured",
    text: "Every line against every unit at every temperature, with the measurement’s own uncertainty.",
  },
  {
    title: "Decide on evidence",
    text: "Compliant quotes side by side, a recommendation, a second pair of eyes, and a record of both.",
  },
];

export default function Home() {
  return (
    <Page>
      <section className="mt-14 max-w-200">
        <h1 className="text-32 font-bold">Filters that nobody stocks, bought on measured data</h1>
        <p className="mt-4 max-w-160 text-18">
          Specify a filter, collect quotes with Touchstone files, and see which of them holds the mask: at which
          frequency, on which unit, at which temperature, and how surely.
        </p>
        <p className="mt-7 flex flex-wrap gap-3">
          <LinkButton to="/sign-in" kind="filled">
            Sign in
          </LinkButton>
        </p>
      </section>
      <ol className="mt-14 grid grid-cols-1 border-t-2 border-ink tablet:grid-cols-2 desktop:grid-cols-4">
        {STEPS.map((step) => (
          <li key={step.title} className="border-b border-edge py-4 pr-6 desktop:border-b-0">
            <h2 className="text-18 font-semibold">{step.title}</h2>
            <p className="mt-1 text-13 text-quiet">{step.text}</p>
          </li>
        ))}
      </ol>
      <section className="mt-9 max-w-160 text-13 text-quiet">
        <h2 className="text-15 font-semibold text-ink">Cautions</h2>
        <p className="mt-1">
          High RF power burns, and breaks filters down: power, passive intermodulation and multipaction claims need
          tests by competent people. Emission limits, export control of technical data and procurement law are local:
          follow them and ask licensed practice.
        </p>
      </section>
    </Page>
  );
}
