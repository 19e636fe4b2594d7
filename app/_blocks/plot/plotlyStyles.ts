import { pageNonce } from "@/app/_ui/nonce";

/**
 * Style elements that Plotly looks for by id before it makes its own. Its own would carry no nonce, so the content security
 * policy would refuse them, and with them every rule that lays its layers over each other. Imported before Plotly is.
 */
const ids = [
  // Plotly's rules, which it inserts one by one.
  "plotly.js-style-global",
  // Rules of the map library inside its bundle, which no plot of ours uses: an empty element keeps them out.
  "9f215cf04c5486422605d13261cb87401f4e7763b6296af81e98efbc0130da53",
];

for (const id of ids) {
  if (document.getElementById(id) !== null) continue;
  const style = document.createElement("style");
  style.id = id;
  style.nonce = pageNonce();
  document.head.append(style);
}
