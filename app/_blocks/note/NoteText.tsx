"use client";

import "katex/dist/katex.min.css";
import { memo, useMemo } from "react";
import Markdown, { type Components } from "react-markdown";
import rehypeKatex from "rehype-katex";
import remarkGfm from "remark-gfm";
import remarkMath from "remark-math";
import type { PageView } from "@/app/_page/contract";
import type { NoteValue } from "@/cells";
import { LiveValue } from "./LiveValue";
import { quoteAddress, withQuotes } from "./noteMarkdown";

export interface NoteTextProps {
  readonly text: string;
  readonly values: readonly NoteValue[];
  readonly view: PageView;
}

const noValues: readonly NoteValue[] = [];
const remark = [remarkGfm, remarkMath];
const rehype: [typeof rehypeKatex, { trust: false; strict: "ignore"; throwOnError: false }][] = [
  [rehypeKatex, { trust: false, strict: "ignore", throwOnError: false }],
];

/** Addresses a note may lead to: other pages of the web by https, mail, and our own quotes. Everything else becomes plain text. */
function allowed(url: string): string {
  return url.startsWith(quoteAddress) || /^(https?:|mailto:)/iu.test(url) ? url : "";
}

/** A note as it reads: Markdown without raw HTML and without pictures from elsewhere, maths, and values that stay live. */
export const NoteText = memo(function NoteText({ text, values = noValues, view }: NoteTextProps) {
  const source = useMemo(() => withQuotes(text, values), [text, values]);
  const components = useMemo<Components>(
    () => ({
      a({ href, children }) {
        if (href?.startsWith(quoteAddress)) return <LiveValue value={values[Number(href.slice(quoteAddress.length))]} view={view} />;
        if (href === undefined || href === "") return <>{children}</>;
        return (
          <a href={href} className="underline" rel="noopener noreferrer nofollow" target="_blank">
            {children}
          </a>
        );
      },
      // A picture from elsewhere would tell its server who reads this page, and when.
      img: ({ alt }) => <span className="text-second">[picture: {alt === undefined || alt === "" ? "without a description" : alt}]</span>,
      h1: ({ children }) => <h3 className="mt-4 text-[1.18em] leading-7 font-semibold first:mt-0">{children}</h3>,
      h2: ({ children }) => <h4 className="mt-4 text-[1.06em] leading-7 font-semibold first:mt-0">{children}</h4>,
      h3: ({ children }) => <h5 className="mt-3 font-semibold italic first:mt-0">{children}</h5>,
      ul: ({ children }) => <ul className="my-2 list-disc pl-6">{children}</ul>,
      ol: ({ children }) => <ol className="my-2 list-decimal pl-6">{children}</ol>,
      blockquote: ({ children }) => <blockquote className="my-2 border-l border-axis pl-4 text-second">{children}</blockquote>,
      code: ({ children }) => <code className="font-mono text-[0.86em]">{children}</code>,
      pre: ({ children }) => (
        <pre tabIndex={0} className="my-2 overflow-x-auto border-l border-axis pl-4 leading-5">
          {children}
        </pre>
      ),
      table: ({ children }) => (
        <div className="my-2 overflow-x-auto" tabIndex={0} role="region" aria-label="Table">
          <table className="border-collapse font-sans text-ui">{children}</table>
        </div>
      ),
      th: ({ children }) => <th className="border-b border-ink pr-4 text-left font-semibold">{children}</th>,
      td: ({ children }) => <td className="border-b border-hairline pr-4">{children}</td>,
      hr: () => <hr className="my-4 border-hairline" />,
    }),
    [values, view],
  );
  return (
    <Markdown remarkPlugins={remark} rehypePlugins={rehype} skipHtml urlTransform={allowed} components={components}>
      {source}
    </Markdown>
  );
});
