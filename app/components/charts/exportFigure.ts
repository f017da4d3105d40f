/** Figures as files: SVG with every style written into it, in the light theme, and PNG made from that SVG. */

const styles = [
  "fill",
  "fill-opacity",
  "stroke",
  "stroke-width",
  "stroke-dasharray",
  "stroke-linejoin",
  "stroke-linecap",
  "opacity",
  "font-family",
  "font-size",
  "font-weight",
  "font-style",
  "font-variant-numeric",
  "text-anchor",
] as const;

/** Hand a file to the browser's download. */
export function download(name: string, content: Blob): void {
  const address = URL.createObjectURL(content);
  const link = document.createElement("a");
  link.href = address;
  link.download = name;
  link.click();
  setTimeout(() => URL.revokeObjectURL(address), 10_000);
}

/** A free-standing SVG document of a plot: light theme, no classes, no fonts embedded, nothing that only serves pointing. */
export function standaloneSvg(plot: SVGSVGElement): string {
  const { width, height } = plot.viewBox.baseVal;
  const stage = document.createElement("div");
  stage.style.cssText = "position:absolute;left:-99999px;top:0";
  // The page's theme is the light one while styles are read; nothing is painted in between.
  const page = document.documentElement;
  const theme = page.dataset.theme;
  page.dataset.theme = "light";
  const copy = plot.cloneNode(true) as SVGSVGElement;
  stage.append(copy);
  document.body.append(stage);
  try {
    for (const element of copy.querySelectorAll("[data-screen-only]")) element.remove();
    for (const element of copy.querySelectorAll<SVGElement>("*")) {
      const computed = getComputedStyle(element);
      for (const style of styles) {
        const value = computed.getPropertyValue(style);
        if (value) element.setAttribute(style, value);
      }
      element.removeAttribute("class");
      element.removeAttribute("style");
    }
    copy.setAttribute("xmlns", "http://www.w3.org/2000/svg");
    copy.setAttribute("width", String(width));
    copy.setAttribute("height", String(height));
    copy.removeAttribute("class");
    copy.removeAttribute("style");
    const ground = document.createElementNS("http://www.w3.org/2000/svg", "rect");
    ground.setAttribute("width", "100%");
    ground.setAttribute("height", "100%");
    ground.setAttribute("fill", "#ffffff");
    copy.prepend(ground);
    return new XMLSerializer().serializeToString(copy);
  } finally {
    stage.remove();
    if (theme === undefined) delete page.dataset.theme;
    else page.dataset.theme = theme;
  }
}

/** The same figure as a bitmap, `scale` pixels for each px on screen. */
export async function bitmapOf(svg: string, width: number, height: number, scale: number): Promise<Blob> {
  const address = URL.createObjectURL(new Blob([svg], { type: "image/svg+xml" }));
  try {
    const image = new Image();
    image.src = address;
    await image.decode();
    const canvas = document.createElement("canvas");
    canvas.width = width * scale;
    canvas.height = height * scale;
    const context = canvas.getContext("2d");
    if (!context) throw new Error("This browser cannot draw bitmaps.");
    context.drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise((resolve, reject) =>
      canvas.toBlob((blob) => (blob ? resolve(blob) : reject(new Error("The bitmap could not be made."))), "image/png"),
    );
  } finally {
    URL.revokeObjectURL(address);
  }
}
