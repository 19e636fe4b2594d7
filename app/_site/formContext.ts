"use client";

import { createContext } from "react";

/** What was typed before the form came back with a problem, by name of the field. */
export const SentValues = createContext<Readonly<Record<string, string>>>({});
