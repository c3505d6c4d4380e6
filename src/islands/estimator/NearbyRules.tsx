import { useEffect, useState, type SubmitEvent, type ReactElement } from 'react';
import { logRuleNames, type LogRule } from '~/domain/timber/log-rules.ts';
import type { QuotingPractice } from '~/schemas/quoting-practice.ts';
import { ApiRefusal, callApi } from '~/islands/call-api.ts';
import { Button } from '~/islands/form/choices.tsx';
import { Field } from '~/islands/form/fields.tsx';
import { countOf } from '~/islands/logs/words.ts';

const key = 'estimator-quoting-practice';

interface Nearby {
  readonly practice: QuotingPractice | null;
  readonly keep: (practice: QuotingPractice) => void;
}

/** What was last answered. It stays in this tab, so that it is there without signal too. */
export function useNearbyRules(): Nearby {
  const [practice, setPractice] = useState<QuotingPractice | null>(null);
  useEffect(() => {
    try {
      setPractice(JSON.parse(window.sessionStorage.getItem(key) ?? 'null') as QuotingPractice | null);
    } catch {
      // A private window may refuse: then it is asked anew.
    }
  }, []);
  const keep = (next: QuotingPractice): void => {
    setPractice(next);
    try {
      window.sessionStorage.setItem(key, JSON.stringify(next));
    } catch {
      // As above.
    }
  };
  return { practice, keep };
}

/** How many sawyers near the asker charge by this log rule; nothing before it is known. */
export function RuleNote({ rule, practice }: { readonly rule: LogRule; readonly practice: QuotingPractice | null }): ReactElement | null {
  const known = practice?.practice;
  const sawyers = known?.bases.find((one) => one.basis === 'log-scale' && one.rule === rule)?.sawyers;
  return known && sawyers !== undefined ? <span className="block text-sm font-normal text-ink-soft">{sawyers} of {known.sawyers} sawyers near you</span> : null;
}

function basisWords({ basis, rule }: NonNullable<QuotingPractice['practice']>['bases'][number]): string {
  if (basis === 'hourly') return 'by the hour';
  if (rule === null) return basis === 'lumber-tally' ? 'by the boards after sawing, each by another rule' : 'by log scale, each by another rule';
  if (basis === 'lumber-tally') return `by the boards after sawing (lumber tally, ${rule === 'hardwood' ? 'hardwood rule' : 'exact decimals'})`;
  return `by log scale, ${Object.hasOwn(logRuleNames, rule) ? logRuleNames[rule as LogRule] : rule}`;
}

function Answer({ practice }: { readonly practice: QuotingPractice }): ReactElement {
  const { zip, radiusMi, fewest, practice: known } = practice;
  if (!known) return <p>Fewer than {fewest} sawyers within {radiusMi} miles of {zip} show their rates here: too few to count without pointing at one. Ask each which rule the price goes by.</p>;
  return (
    <>
      <p>Of {countOf(known.sawyers, 'sawyer')} within {radiusMi} miles of {zip}:</p>
      <ul className="list-disc pl-5">
        {known.bases.map((one) => <li key={`${one.basis} ${one.rule}`}><span className="figure font-bold">{one.sawyers}</span> {basisWords(one)}</li>)}
        {known.others > 0 && <li><span className="figure font-bold">{known.others}</span> in another way</li>}
      </ul>
    </>
  );
}

/** What the sawyers near a ZIP code charge by. The one thing on this page that asks the server: no figure waits for it. */
export function NearbyRules({ practice, keep }: Nearby): ReactElement {
  const [zip, setZip] = useState('');
  const [error, setError] = useState<string | undefined>(undefined);
  const [asking, setAsking] = useState(false);

  const ask = async (event: SubmitEvent): Promise<void> => {
    event.preventDefault();
    if (!/^\d{5}(-\d{4})?$/.test(zip.trim())) return setError('A ZIP code has five digits.');
    setError(undefined);
    setAsking(true);
    try {
      keep(await callApi<QuotingPractice>('GET', `/api/quoting-practice?zip=${zip.trim()}`));
    } catch (refusal) {
      const unreachable = refusal instanceof ApiRefusal && refusal.status === 0;
      setError(unreachable ? 'This needs a signal, and there is none just now. Everything else here works without.' : refusal instanceof Error ? refusal.message : 'That did not work. Try again.');
    } finally {
      setAsking(false);
    }
  };

  return (
    <section className="no-print mt-5 border-t border-rule pt-4" aria-labelledby="nearby-rules">
      <h3 id="nearby-rules">Which rule do sawyers near you quote in?</h3>
      <form onSubmit={(event) => void ask(event)} noValidate className="mt-2 flex flex-wrap items-end gap-x-4 gap-y-3">
        <Field name="quoting-zip" label="ZIP code of the logs" width="short" figure inputMode="numeric" autoComplete="postal-code" maxLength={10} value={zip} error={error} onChange={(event) => setZip(event.target.value)} />
        <Button kind="outlined" type="submit" disabled={asking}>{asking ? 'Asking' : 'Count them'}</Button>
      </form>
      <div className="mt-3" role="status">{practice && <Answer practice={practice} />}</div>
    </section>
  );
}
