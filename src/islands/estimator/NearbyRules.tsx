import { useState, type FormEvent, type ReactElement } from 'react';
import { logRuleNames, logRules } from '~/domain/timber/log-rules.ts';
import type { QuotingPractice } from '~/schemas/quoting-practice.ts';
import { Button } from '~/islands/form/choices.tsx';
import { Field } from '~/islands/form/fields.tsx';
import { countOf } from '~/islands/logs/words.ts';

const nameOf = ({ basis, rule }: QuotingPractice['practices'][number]): string => {
  if (basis === 'hourly') return 'by the hour';
  if (basis === 'lumber-tally') return 'by the lumber tally, after sawing';
  return `by ${logRuleNames[logRules.find((known) => known === rule) ?? 'internationalQuarter']} log scale`;
};

const sentence = ({ sawyers, radiusMi, practices }: QuotingPractice): string =>
  sawyers === 0 ? `No sawyer within ${radiusMi} miles has a rate card here yet. Ask which rule they quote by.` : `Of ${countOf(sawyers, 'sawyer')} within ${radiusMi} miles: ${practices.map((practice) => `${practice.sawyers} ${nameOf(practice)}`).join(', ')}.`;

/** By what the sawyers near a ZIP code charge. The one thing here that asks the server; the figures do not need it. */
export function NearbyRules(): ReactElement {
  const [zip, setZip] = useState('');
  const [answer, setAnswer] = useState('');
  const [error, setError] = useState<string | undefined>(undefined);

  const ask = async (event: FormEvent): Promise<void> => {
    event.preventDefault();
    setAnswer('');
    if (!/^\d{5}$/.test(zip.trim())) return setError('A ZIP code has five digits.');
    setError(undefined);
    try {
      const response = await fetch(`/api/quoting-practice?zip=${zip.trim()}`);
      const json: unknown = await response.json();
      if (response.ok) setAnswer(sentence(json as QuotingPractice));
      else setError((json as { errors?: { message: string }[] }).errors?.[0]?.message ?? 'That did not work. Try again.');
    } catch {
      setError('There is no signal just now. Try again when there is.');
    }
  };

  return (
    <form onSubmit={(event) => void ask(event)} noValidate className="flex max-w-prose flex-wrap items-end gap-4 py-3">
      <Field name="zip" label="Your ZIP code" width="short" figure inputMode="numeric" autoComplete="postal-code" maxLength={5} value={zip} error={error} onChange={(event) => setZip(event.target.value)} />
      <Button kind="outlined" type="submit">Ask</Button>
      <p role="status" className="w-full">{answer}</p>
    </form>
  );
}
