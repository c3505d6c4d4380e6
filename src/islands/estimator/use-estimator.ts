import { useEffect, useState } from 'react';
import type { ScaleSettings } from '~/domain/timber/log-scale.ts';
import { readLogs, writeLogs, type LogGroup } from '~/domain/timber/logs-in-url.ts';
import type { Units } from '~/islands/logs/words.ts';
import { emptyDraft, type Draft } from './draft.ts';

export type Settings = Required<{ [K in keyof ScaleSettings]: NonNullable<ScaleSettings[K]> }>;

export const usualSettings: Settings = { halfInchRounding: 'up', longestScalingLengthFt: 20 };

export interface EstimatorState {
  readonly logs: readonly LogGroup[];
  readonly draft: Draft;
  readonly settings: Settings;
  readonly units: Units;
}

/** A longer address is refused by servers on the way; the list then stays on this device only. */
const longestLink = 7000;

const draftKey = 'estimator-draft';

const settingsIn = (query: URLSearchParams): Settings => {
  const longest = Number(query.get('longest'));
  return {
    halfInchRounding: query.get('half') === 'down' ? 'down' : 'up',
    longestScalingLengthFt: longest === 16 || longest === 32 || longest === 40 ? longest : 20,
  };
};

/** The query that carries the list, or null when it is too long for a link. */
export function linkQuery({ logs, settings, units }: Pick<EstimatorState, 'logs' | 'settings' | 'units'>): string | null {
  const query = new URLSearchParams();
  if (logs.length > 0) query.set('logs', writeLogs(logs));
  if (settings.halfInchRounding === 'down') query.set('half', 'down');
  if (settings.longestScalingLengthFt !== 20) query.set('longest', String(settings.longestScalingLengthFt));
  if (units === 'metric') query.set('units', 'metric');
  const text = query.toString().replaceAll('%7E', '~').replaceAll('%21', '!');
  return text.length > longestLink ? null : text;
}

const readKept = (): Partial<EstimatorState> => {
  try {
    return JSON.parse(window.sessionStorage.getItem(draftKey) ?? '{}') as Partial<EstimatorState>;
  } catch {
    return {};
  }
};

const keep = (state: Partial<EstimatorState>): void => {
  try {
    window.sessionStorage.setItem(draftKey, JSON.stringify(state));
  } catch {
    // A private window may refuse; the address still carries the list.
  }
};

export interface Estimator extends EstimatorState {
  /** False until the address has been read. */
  readonly ready: boolean;
  /** What of the address could not be read, in words; empty when all was. */
  readonly trouble: string;
  readonly change: (part: Partial<EstimatorState>) => void;
}

/** The list, the form and the settings. The list lives in the address, so reloading, going back and sharing keep it; what is being typed stays in this tab. */
export function useEstimator(): Estimator {
  const [state, setState] = useState<EstimatorState>({ logs: [], draft: emptyDraft, settings: usualSettings, units: 'us' });
  const [ready, setReady] = useState(false);
  const [trouble, setTrouble] = useState('');

  useEffect(() => {
    const query = new URLSearchParams(window.location.search);
    const read = readLogs(query.get('logs') ?? '');
    const kept = readKept();
    if (!read.ok) setTrouble(`This link holds logs that cannot be read: ${read.problems.map(({ message }) => message).join(' ')}`);
    const fromLink = read.ok ? read.value : [];
    setState({
      logs: query.has('logs') ? fromLink : (kept.logs ?? []),
      draft: { ...emptyDraft, ...kept.draft },
      settings: settingsIn(query),
      units: query.get('units') === 'metric' ? 'metric' : 'us',
    });
    setReady(true);
  }, []);

  useEffect(() => {
    if (!ready) return;
    const query = linkQuery(state);
    // A list too long for the address is kept in this tab.
    keep({ draft: state.draft, ...(query === null ? { logs: state.logs } : {}) });
    if (trouble !== '' && state.logs.length === 0) return;
    window.history.replaceState(window.history.state, '', query ? `?${query}` : window.location.pathname);
  }, [state, ready, trouble]);

  return { ...state, ready, trouble, change: (part) => setState((before) => ({ ...before, ...part })) };
}
