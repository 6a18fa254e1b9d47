/** What is being typed, kept on this machine: it survives a reload and a dead network, and goes once it was sent. */
import { useCallback, useEffect, useState } from 'react';

const keyOf = (key: string) => `strainwright.draft.${key}`;

export function readDraft(key: string): unknown {
  const text = localStorage.getItem(keyOf(key));
  if (text === null) return null;
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}

export function clearDraft(key: string): void {
  localStorage.removeItem(keyOf(key));
}

/** State that starts from its draft, if one that `accept` recognises is there. */
export function useDraft<T>(key: string, empty: T, accept: (value: unknown) => T | null): { value: T; setValue: (value: T) => void; clear: () => void; restored: boolean } {
  const [restored] = useState(() => accept(readDraft(key)) !== null);
  const [value, setValue] = useState<T>(() => accept(readDraft(key)) ?? empty);
  useEffect(() => {
    if (JSON.stringify(value) === JSON.stringify(empty)) clearDraft(key);
    else localStorage.setItem(keyOf(key), JSON.stringify(value));
  }, [key, value, empty]);
  const clear = useCallback(() => {
    clearDraft(key);
    setValue(empty);
  }, [key, empty]);
  return { value, setValue, clear, restored };
}
