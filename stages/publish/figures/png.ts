/**
 * A figure as PNG. Letters are drawn with the machine's own fonts, or with those handed in; where there are
 * neither, the marks are drawn and the letters are missing.
 * @param width pixels
 * @param fontFiles paths of TrueType or OpenType files to be used beside the machine's own
 */
export async function svgToPng(
  svg: string,
  width: number,
  fontFiles: readonly string[] = [],
): Promise<Uint8Array> {
  const { Resvg } = await import("@resvg/resvg-js");
  const drawing = new Resvg(svg, {
    fitTo: { mode: "width", value: width },
    background: "#ffffff",
    font: { loadSystemFonts: true, fontFiles: [...fontFiles], defaultFontFamily: "DejaVu Sans" },
  });
  return drawing.render().asPng();
}
