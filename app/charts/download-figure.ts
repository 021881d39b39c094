// A figure as a file of its own: SVG with its colours written out, or PNG drawn from that.

const SVG = "http://www.w3.org/2000/svg";
/** px of the picture for one of the figure: fit for a report. */
const PNG_SCALE = 2;
const FONT = "'Manrope Variable', Manrope, 'Liberation Sans', Arial, sans-serif";

/**
 * Saves what a figure shows at the width it has now: every drawing in it that is in sight, where it stands.
 *
 * @param root holds the drawings, each an `svg` with `role="img"`
 * @param name of the file, without ending
 */
export async function downloadFigure(root: HTMLElement, name: string, kind: "svg" | "png"): Promise<void> {
  const picture = pictureOf(root);
  picture.prepend(await ownFonts());
  const text = new XMLSerializer().serializeToString(picture);
  const svg = new Blob([text], { type: "image/svg+xml" });
  save(kind === "svg" ? svg : await rasterise(picture, text), `${name}.${kind}`);
}

/** One SVG with the drawings in sight, and what is drawn between them, at their places. */
function pictureOf(root: HTMLElement): SVGSVGElement {
  const drawings = [...root.querySelectorAll<SVGSVGElement>("svg[data-figure]")].filter(
    (svg) => svg.getBoundingClientRect().width > 0,
  );
  const boxes = drawings.map((svg) => svg.getBoundingClientRect());
  const left = Math.min(...boxes.map((box) => box.left));
  const top = Math.min(...boxes.map((box) => box.top));
  const width = Math.ceil(Math.max(...boxes.map((box) => box.right)) - left);
  const height = Math.ceil(Math.max(...boxes.map((box) => box.bottom)) - top);
  const picture = document.createElementNS(SVG, "svg");
  const place = { viewBox: `0 0 ${width} ${height}`, width: `${width}`, height: `${height}`, "font-family": FONT };
  setAttributes(picture, { xmlns: SVG, ...place, "font-size": "12" });
  const ground = document.createElementNS(SVG, "rect");
  setAttributes(ground, { width: "100%", height: "100%", fill: colourOf("var(--color-leaf)") });
  picture.append(ground);
  drawings.forEach((svg, index) => {
    const box = boxes[index];
    if (!box) return;
    const copy = withOwnColours(svg);
    const at = { x: `${box.left - left}`, y: `${box.top - top}`, width: `${box.width}`, height: `${box.height}` };
    setAttributes(copy, at);
    picture.append(copy);
  });
  return picture;
}

/** A copy that needs no style sheet: classes and variables are written out as colours. */
function withOwnColours(svg: SVGSVGElement): SVGSVGElement {
  const copy = svg.cloneNode(true) as SVGSVGElement;
  const originals = [svg, ...svg.querySelectorAll<SVGElement>("*")];
  [copy, ...copy.querySelectorAll<SVGElement>("*")].forEach((element, index) => {
    const original = originals[index];
    if (original && element.hasAttribute("class")) {
      element.setAttribute("color", getComputedStyle(original).color);
      element.removeAttribute("class");
    }
    for (const { name, value } of [...element.attributes]) {
      if (value.includes("var(--color-"))
        element.setAttribute(name, value.replace(/var\(--color-[a-z-]+\)/g, colourOf));
      if (name === "style" && original) element.setAttribute("style", `opacity:${getComputedStyle(original).opacity}`);
    }
  });
  return copy;
}

/** The faces that the page's style sheets bring in, written out: a picture can fetch nothing. */
async function ownFonts(): Promise<SVGStyleElement> {
  const rules = [...document.styleSheets].flatMap((sheet) => [...sheet.cssRules]);
  const faces = rules.filter((rule): rule is CSSFontFaceRule => rule instanceof CSSFontFaceRule);
  const style = document.createElementNS(SVG, "style");
  style.textContent = (await Promise.all(faces.map(writtenOut))).join("\n");
  return style;
}

async function writtenOut(face: CSSFontFaceRule): Promise<string> {
  const [quoted, relative] = /url\("?([^")]+)"?\)/.exec(face.style.getPropertyValue("src")) ?? [];
  if (quoted === undefined || relative === undefined) return face.cssText;
  const address = new URL(relative, face.parentStyleSheet?.href ?? document.baseURI);
  const bytes = new Uint8Array(await (await fetch(address)).arrayBuffer());
  const text = Array.from(bytes, (byte) => String.fromCharCode(byte)).join("");
  return face.cssText.replace(quoted, `url("data:font/woff2;base64,${btoa(text)}")`);
}

/** The colour a variable has by day or night, as the page shows it. */
function colourOf(variable: string): string {
  const probe = document.createElement("span");
  probe.style.color = variable;
  document.body.append(probe);
  const { color } = getComputedStyle(probe);
  probe.remove();
  return color;
}

async function rasterise(picture: SVGSVGElement, text: string): Promise<Blob> {
  const { width, height } = picture.viewBox.baseVal;
  const image = new Image();
  image.src = `data:image/svg+xml;charset=utf-8,${encodeURIComponent(text)}`;
  await image.decode();
  const canvas = document.createElement("canvas");
  canvas.width = width * PNG_SCALE;
  canvas.height = height * PNG_SCALE;
  canvas.getContext("2d")?.drawImage(image, 0, 0, canvas.width, canvas.height);
  return new Promise((resolve, reject) => {
    canvas.toBlob((blob) => {
      if (blob) resolve(blob);
      else reject(new Error("the picture could not be drawn"));
    }, "image/png");
  });
}

function save(blob: Blob, name: string): void {
  const address = URL.createObjectURL(blob);
  const link = document.createElement("a");
  link.href = address;
  link.download = name;
  link.click();
  URL.revokeObjectURL(address);
}

function setAttributes(element: Element, attributes: Readonly<Record<string, string>>): void {
  for (const [name, value] of Object.entries(attributes)) element.setAttribute(name, value);
}
