import { autocompletion, closeCompletion, selectedCompletion, type Completion, type CompletionContext, type CompletionResult } from "@codemirror/autocomplete";
import { Prec, type Extension } from "@codemirror/state";
import { keymap } from "@codemirror/view";
import type { Suggestion } from "./suggestions";

const word = /[\p{L}_][\p{L}\p{N}_.]*$/u;

function option(suggestion: Suggestion): Completion {
  return {
    label: suggestion.label,
    detail: suggestion.detail,
    ...(suggestion.help === "" ? {} : { info: suggestion.help }),
    apply: suggestion.insert,
    boost: suggestion.boost,
  };
}

/** Completion of columns, species, bodies, lines and functions, each with its unit or what it does; `offered` is asked anew each time. */
export function formulaCompletion(offered: () => readonly Suggestion[]): Extension {
  const source = (context: CompletionContext): CompletionResult | null => {
    // Asked for while typing and answered after the person went elsewhere: the list must not open over what they went to.
    if (!context.explicit && context.view?.hasFocus === false) return null;
    const before = context.matchBefore(word);
    if (before === null && !context.explicit) return null;
    const line = context.state.doc.lineAt(context.pos);
    const upToHere = line.text.slice(0, context.pos - line.from);
    // A name that is only being given, left of its equals sign, is nobody's to complete; nor is a comment.
    if (upToHere.includes("#") || (!context.explicit && !upToHere.includes("="))) return null;
    return { from: before?.from ?? context.pos, options: offered().map(option), validFor: /^[\p{L}\p{N}_.]*$/u };
  };
  return [enterAfterWholeName, autocompletion({ override: [source], icons: false })];
}

/** Where the chosen completion is what stands there already, Enter means a new line and not the completion. */
const enterAfterWholeName = Prec.highest(
  keymap.of([
    {
      key: "Enter",
      run(view) {
        const chosen = selectedCompletion(view.state);
        if (chosen === null) return false;
        const { head } = view.state.selection.main;
        if (view.state.sliceDoc(Math.max(0, head - chosen.label.length), head) === chosen.label) closeCompletion(view);
        return false;
      },
    },
  ]),
);
