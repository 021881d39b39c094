// Draws one scene of the charts, named by the address: ?scene=drawing|many|figure|strips|scales|smith|delay.
import { createRoot } from "react-dom/client";
import "~/app.css";
import { DecisionStrip } from "~/charts/decision-strip";
import { Drawing } from "~/charts/drawing";
import { MarginStrip, MarginStripScale } from "~/charts/margin-strip";
import { TraceFigure } from "~/charts/trace-figure";
import { wallsFromRequirements } from "~/charts/walls";
import { DelayScene, ScalesScene, SmithScene } from "./curves";
import { many, requirements, single, worstPoints } from "./invented";

const walls = wallsFromRequirements(requirements);
const scene = new URLSearchParams(location.search).get("scene") ?? "drawing";

function Scene() {
  switch (scene) {
    case "many":
      return (
        <Drawing
          walls={walls}
          traces={many}
          worstPoints={worstPoints.slice(0, 2)}
          title="Measured traces"
          window={[1.89e9, 2.05e9]}
        />
      );
    case "walls":
      return <Drawing walls={walls} title="Drawing of an invented specification" />;
    case "even":
      return (
        <Drawing
          walls={walls}
          traces={single}
          worstPoints={worstPoints}
          stretched={false}
          title="Drawing, even scale"
        />
      );
    case "figure":
      return (
        <TraceFigure
          walls={walls}
          traces={many}
          worstPoints={worstPoints}
          title="Measured traces"
          caption="unit 0420, 70 °C, over 14 others"
          initialView="passband"
        />
      );
    case "waiting":
      return <TraceFigure walls={walls} title="Measured traces" />;
    case "strips":
      return <Strips />;
    case "scales":
      return <ScalesScene />;
    case "smith":
      return <SmithScene />;
    case "delay":
      return <DelayScene />;
    default:
      return (
        <Drawing
          walls={walls}
          traces={single}
          worstPoints={worstPoints}
          selectedId="a"
          title="Drawing of an invented specification"
        />
      );
  }
}

function Strips() {
  const lines = [2.3, 5.2, 6.7, 12, 19.8, 48].map((margin, index) => ({
    lineNumber: `3.${index}`,
    margin,
    verdict: "pass" as const,
  }));
  return (
    <div style={{ display: "grid", gap: 12 }}>
      <MarginStripScale />
      <MarginStrip
        label="One"
        unit="% of limit"
        margins={[{ lineNumber: "2.1", margin: 1, verdict: "conditional-pass" }, ...lines]}
      />
      <MarginStrip
        label="Two"
        unit="% of limit"
        margins={[{ lineNumber: "2.1", margin: 1.6, verdict: "pass" }, ...lines]}
      />
      <MarginStrip
        label="Three"
        unit="% of limit"
        margins={[
          { lineNumber: "2.1", margin: -6.3, verdict: "fail" },
          { lineNumber: "2.2", margin: 0.1, verdict: "conditional-pass" },
          ...lines,
        ]}
      />
      <MarginStrip
        label="Four"
        unit="% of limit"
        margins={[{ lineNumber: "2.1", margin: -40, verdict: "fail" }, ...lines]}
      />
      <div
        style={{ border: "1px solid var(--color-edge)", background: "var(--color-leaf)", padding: 20, maxWidth: 460 }}
      >
        <DecisionStrip
          label="Line 2.1"
          value={1.012}
          interval={[0.962, 1.062]}
          limit={0.95}
          sense="max"
          verdict="fail"
          unit="dB"
        />
        <DecisionStrip
          label="Line 4.1"
          value={16.4}
          interval={[15.7, 17.2]}
          limit={16}
          sense="min"
          verdict="conditional-pass"
          unit="dB"
        />
      </div>
    </div>
  );
}

const root = document.getElementById("root");
if (root) {
  createRoot(root).render(
    <main style={{ maxWidth: 892, padding: 16, boxSizing: "border-box" }}>
      <Scene />
    </main>,
  );
}
