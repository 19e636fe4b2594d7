import { variableCovariance } from "../trend/linearForm";
import { significantTerms, type LinearForm } from "./algebra";

/**
 * Each input's share of a number's variance, largest first, summing to 1. A covariance of two inputs counts half to each, so
 * that a share may be negative. Empty where nothing has a known σ.
 */
export function shareOf(form: LinearForm): { readonly input: string; readonly share: number }[] {
  const terms = significantTerms(form).filter(({ variable }) => variable.sigma >= 0);
  const parts = terms.map((own) => {
    let part = 0;
    for (const other of terms) {
      const covariance = variableCovariance(own.variable, other.variable);
      if (Number.isFinite(covariance)) part += own.partial * other.partial * covariance;
    }
    return { input: own.variable.label, share: part };
  });
  const total = parts.reduce((sum, { share }) => sum + share, 0);
  if (!(total > 0)) return [];
  return parts
    .map(({ input, share }) => ({ input, share: share / total }))
    .filter(({ share }) => share !== 0)
    .sort((a, b) => b.share - a.share || (a.input < b.input ? -1 : 1));
}
