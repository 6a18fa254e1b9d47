import { act, renderHook } from '@testing-library/react';
import { readDraft, useDraft } from './use-draft';

const accept = (value: unknown) => (typeof value === 'string' && value !== '' ? value : null);

describe('useDraft', () => {
  beforeEach(() => localStorage.clear());

  it('brings back after a reload what was typed', () => {
    const first = renderHook(() => useDraft('t', '', accept));
    act(() => first.result.current.setValue('50.01'));
    first.unmount();
    const second = renderHook(() => useDraft('t', '', accept));
    expect(second.result.current.value).toBe('50.01');
    expect(second.result.current.restored).toBe(true);
  });

  it('forgets it once it was sent', () => {
    const { result } = renderHook(() => useDraft('t', '', accept));
    act(() => result.current.setValue('50.01'));
    act(() => result.current.clear());
    expect(readDraft('t')).toBeNull();
  });

  it('starts empty when the draft is not readable', () => {
    localStorage.setItem('strainwright.draft.t', '{');
    expect(renderHook(() => useDraft('t', '', accept)).result.current.value).toBe('');
  });
});
