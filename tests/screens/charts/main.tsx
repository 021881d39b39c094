// Draws one scene of the charts, named by the address: ?scene=drawing|many|figure|strips.
import { createRoot } from "react-dom/client";
import "~/app.css";
import { Drawing } from "~/charts/drawing";
import { wallsFromRequirements } from "~/charts/walls";
import { many, requirements, single, worstPoints } from "./invented";

const walls = wallsFromRequirements(requirements);
const scene = new URLSearchParams(location.search).get("scene") ?? "drawing";

function Scene() {
  switch (scene) {
    case "many":
      return <Drawing walls={walls} traces={many} worstPoints={worstPoints.slice(0, 2)} title="Measured traces" window={[1.89e9, 2.05e9]} />;
    case "walls":
      return <Drawing walls={walls} title="Drawing of an invented specification" />;
    case "even":
      return <Drawing walls={walls} traces={single} worstPoints={worstPoints} stretched={false} title="Drawing, even scale" />;
    default:
      return <Drawing walls={walls} traces={single} worstPoints={worstPoints} selectedId="a" title="Drawing of an invented specification" />;
  }
}

const root = document.getElementById("root");
if (root) {
  createRoot(root).render(
    <main style={{ maxWidth: 892, padding: 16, boxSizing: "border-box" }}>
      <Scene />
    </main>,
  );
}
