import { rules, type GroupRole } from "@/db/access";

/** Roles that may edit pages, as the one table of rules says. */
export const editingRoles: readonly string[] = rules.page.edit satisfies readonly GroupRole[] | readonly string[];
