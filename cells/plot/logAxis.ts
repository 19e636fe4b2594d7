import type { Drawing } from "./drawing";

/** Says that some values have no place on a logarithmic axis; they are counted as out of domain. */
export function warnOutOfLog(drawing: Drawing, field: string, what: string, count: number, one = "sample"): void {
  if (count === 0) return;
  const them = count === 1 ? one : `${one}s`;
  const verb = one === "value" ? (count === 1 ? "is" : "are") : count === 1 ? "has a value that is" : "have a value that is";
  drawing.warn(
    "not-on-log-axis",
    field,
    `${count} ${them} of ${what} ${verb} not above zero, and a logarithmic axis has no place for that. ${count === 1 ? "It is" : "They are"} counted as out of domain; make the axis linear to see ${count === 1 ? "it" : "them"}.`,
  );
}

/** Says that an end of a logarithmic axis, or an annotation, is not above zero. */
export function warnRangeOfLog(drawing: Drawing): void {
  const { block } = drawing;
  for (const which of ["x", "y"] as const) {
    const axis = which === "x" ? block.xAxis : block.yAxis;
    if (axis?.scale !== "log" || (which === "x" && (block.plot === "pattern" || block.plot === "ternary"))) continue;
    for (const end of ["from", "to"] as const)
      if (axis[end] !== undefined && axis[end] <= 0)
        drawing.warn(
          "not-on-log-axis",
          `${which}Axis.${end}`,
          `The ${which} axis is logarithmic and cannot ${end === "from" ? "begin" : "end"} at ${axis[end]}. Its end follows the data until you give one above zero.`,
        );
    block.drawn.forEach((drawn, place) => {
      if ("annotation" in drawn && drawn.hidden !== true && drawn[which] <= 0)
        drawing.warn(
          "not-on-log-axis",
          `drawn[${place}].${which}`,
          `“${drawn.annotation}” stands at ${drawn[which]}, and the ${which} axis is logarithmic. Move it above zero.`,
        );
    });
  }
}
