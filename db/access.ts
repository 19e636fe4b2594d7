/**
 * Who may do what. Every page, action, route and socket asks {@link may}, and nothing else decides.
 *
 * Where somebody stands (which role, which link) is looked up by `subjectOn` in `db/queries/subjects.ts`; this file is the
 * table of rules alone, and its test goes through every combination.
 */
export type GroupRole = "lead" | "analyst" | "reader";
export type Role = GroupRole | "guest" | "nobody";

/** The one who asks, as they stand towards one group, page or snapshot. */
export type Subject =
  | { readonly role: GroupRole; readonly userId: string; readonly groupId: string }
  | { readonly role: "guest"; readonly linkId: string; readonly opens: { readonly kind: "page" | "snapshot"; readonly id: string }; readonly until: Date }
  | { readonly role: "nobody" };

/** What is asked about. */
export interface Objects {
  group: { readonly kind: "group"; readonly id: string };
  page: { readonly kind: "page"; readonly id: string; readonly groupId: string; readonly archived: boolean };
  snapshot: { readonly kind: "snapshot"; readonly id: string; readonly pageId: string; readonly groupId: string };
}
export type ObjectKind = keyof Objects;
export type ObjectOf<K extends ObjectKind> = Objects[K] & { readonly kind: K };

const everyone: readonly Role[] = ["lead", "analyst", "reader", "guest"];
const members: readonly Role[] = ["lead", "analyst", "reader"];
const editors: readonly Role[] = ["lead", "analyst"];
const leads: readonly Role[] = ["lead"];

/** The rules: for each kind of object and each action, the roles that may. Nobody may do anything. */
export const rules = {
  group: {
    see: members,
    rename: leads,
    invite: leads,
    "change role": leads,
    "remove person": leads,
    "create page": editors,
    "add body": editors,
  },
  page: {
    read: everyone,
    "read source": everyone,
    edit: editors,
    "upload source": editors,
    rename: editors,
    duplicate: editors,
    archive: editors,
    remark: members,
    freeze: leads,
    share: leads,
  },
  snapshot: {
    read: everyone,
    download: everyone,
    share: leads,
  },
} as const;

export type Action<K extends ObjectKind> = keyof (typeof rules)[K] & string;

/** What an archived page refuses to everybody: it can be read, copied and taken out of the archive, and nothing else. */
const refusedOnArchived: ReadonlySet<string> = new Set(["edit", "upload source", "rename", "freeze"]);

/**
 * Whether `subject` may do `action` on `object`.
 *
 * A member's role counts only in their own group, a guest's link only for the one thing it opens; that is checked here
 * again, though the loader already looks them up by object.
 */
export function may<K extends ObjectKind>(subject: Subject, action: Action<NoInfer<K>>, object: ObjectOf<K>): boolean {
  const about: Objects[ObjectKind] = object;
  if (subject.role === "nobody") return false;
  const allowed: Partial<Record<string, readonly Role[]>> = rules[about.kind];
  if (!Object.hasOwn(allowed, action) || !allowed[action]?.includes(subject.role)) return false;
  if (about.kind === "page" && about.archived && refusedOnArchived.has(action)) return false;
  if (subject.role === "guest") return subject.opens.kind === about.kind && subject.opens.id === about.id;
  return subject.groupId === (about.kind === "group" ? about.id : about.groupId);
}
