/** The strict build (no code generation) under its usual import name; it carries no types. */
declare module "plotly.js-dist-min" {
  interface PlotlyLibrary {
    relayout(graph: HTMLElement, update: object): Promise<unknown>;
    restyle(graph: HTMLElement, update: object): Promise<unknown>;
    toImage(
      graph: HTMLElement | { readonly data: object; readonly layout: object; readonly config?: object },
      options: { format: "svg" | "png"; width: number; height: number; imageDataOnly?: boolean },
    ): Promise<string>;
  }
  const plotly: PlotlyLibrary;
  export default plotly;
}
