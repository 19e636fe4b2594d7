import Link from "next/link";
import type { ReactNode } from "react";
import { Chemical } from "@/app/_ui/Chemical";
import { When } from "@/app/_site/When";
import { isFromMemory, ownBodyId, type Body, type OwnBody } from "@/cells";
import type { BodyOfGroup } from "@/db/queries/bodies";

interface Listed {
  readonly species: string;
  readonly value: number;
  readonly unit: string;
  readonly sigma: number | null;
  /** Where rows of one body differ in it: whether somebody looked. */
  readonly fromMemory: boolean;
}

/** A built-in compilation: what it is, from where, whether anyone looked, and its values to unfold. */
export function BuiltInBody({ body }: { readonly body: Body }) {
  const values = body.values.map((value) => ({ ...value, fromMemory: isFromMemory(value.checked) }));
  return (
    <Entry id={body.id} name={body.what} mark={memoryWords(values)} checked="checked in its source">
      {[...new Set(body.values.map(({ source }) => source))].map((source) => (
        <p key={source} className="text-margin text-second">
          {source}
        </p>
      ))}
      <Values of={body.id} values={values} />
    </Entry>
  );
}

/** A body of the group's own, its newest version first and the earlier ones to unfold. */
export function OwnBodyEntry({ versions, groupId, edits }: { readonly versions: readonly BodyOfGroup[]; readonly groupId: string; readonly edits: boolean }) {
  const [newest, ...earlier] = versions;
  if (newest === undefined) return null;
  return (
    <OneVersion version={newest}>
      {edits ? (
        <p className="mt-1">
          <Link href={`/groups/${groupId}/bodies?edit=${newest.code}#add`}>
            Make a new version<span className="sr-only"> of {newest.code}</span>
          </Link>
        </p>
      ) : null}
      {earlier.length === 0 ? null : (
        <details className="mt-1">
          <summary className="cursor-pointer text-indigo">
            {earlier.length === 1 ? "1 earlier version" : `${earlier.length} earlier versions`}
            <span className="sr-only"> of {newest.code}</span>
          </summary>
          <ul className="pl-4">
            {earlier.map((version) => (
              <OneVersion key={version.version} version={version} />
            ))}
          </ul>
        </details>
      )}
    </OneVersion>
  );
}

function OneVersion({ version: { code, version, body, madeBy, madeAt }, children }: { readonly version: BodyOfGroup; readonly children?: ReactNode }) {
  const id = ownBodyId(code, version);
  return (
    <Entry id={id} name={body.name} mark={body.fromMemory ? "from memory" : null} checked="from its source">
      <p className="text-margin wrap-anywhere text-second">{body.source}</p>
      {body.description ? <p className="mt-1 wrap-anywhere">{body.description}</p> : null}
      <p className="text-margin text-second">
        entered by {madeBy ?? "somebody who is gone"}, <When iso={madeAt.toISOString()} as="day" />
      </p>
      <Values of={id} values={listed(body)} />
      {children}
    </Entry>
  );
}

function listed({ values, fromMemory }: OwnBody): Listed[] {
  return values.map(({ species, unit, value, sigma }) => ({ species, unit, value, sigma: sigma ?? null, fromMemory }));
}

function memoryWords(values: readonly Listed[]): string | null {
  const n = values.filter(({ fromMemory }) => fromMemory).length;
  if (n === 0) return null;
  return n === values.length ? "from memory" : `${n} of ${values.length} from memory`;
}

interface EntryProps {
  readonly id: string;
  readonly name: string;
  /** What is from memory, in words. */
  readonly mark: string | null;
  /** What is said where nothing is. */
  readonly checked: string;
  readonly children: ReactNode;
}

function Entry({ id, name, mark, checked, children }: EntryProps) {
  return (
    <li className="border-b border-hairline py-2">
      <div className="flex flex-wrap items-baseline justify-between gap-x-4">
        <span>
          <span className="font-mono text-cell">{id}</span> <span className="wrap-anywhere">{name}</span>
        </span>
        {mark === null ? <span className="text-margin text-second">{checked}</span> : <span className="text-margin text-vermilion">{mark}</span>}
      </div>
      {children}
    </li>
  );
}

function Values({ of, values }: { readonly of: string; readonly values: readonly Listed[] }) {
  const some = values.some(({ fromMemory }) => fromMemory) && !values.every(({ fromMemory }) => fromMemory);
  return (
    <details className="mt-1">
      <summary className="cursor-pointer text-indigo">
        {values.length === 1 ? "1 value" : `${values.length} values`}
        <span className="sr-only"> of {of}</span>
      </summary>
      <div className="overflow-x-auto" tabIndex={0} role="region" aria-label={`Values of ${of}`}>
        <table className="mt-1 text-cell">
          <thead>
            <tr className="text-left text-second">
              <th scope="col" className="pr-6 font-normal">
                species
              </th>
              <th scope="col" className="pr-2 text-right font-normal">
                value
              </th>
              <th scope="col" className="pr-6 text-right font-normal">
                1σ
              </th>
              <th scope="col" className="pr-6 font-normal">
                unit
              </th>
              {some ? (
                <th scope="col" className="font-normal">
                  checked
                </th>
              ) : null}
            </tr>
          </thead>
          <tbody>
            {values.map(({ species, value, unit, sigma, fromMemory }) => (
              <tr key={species}>
                <th scope="row" className="pr-6 text-left font-normal">
                  <Chemical name={species} />
                </th>
                <td className="pr-2 text-right font-mono">{String(value)}</td>
                <td className="pr-6 text-right font-mono text-second">{sigma === null ? "not known" : sigma === 0 ? "exact" : String(sigma)}</td>
                <td className="pr-6">{unit}</td>
                {some ? <td className={fromMemory ? "text-vermilion" : "text-second"}>{fromMemory ? "from memory" : "in its source"}</td> : null}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </details>
  );
}
