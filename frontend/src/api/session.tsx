/** Who is signed in. */
import { mayDo, type Action } from '@strainwright/common/contract/permissions';
import { sessionAnswer, user as userSchema, type User } from '@strainwright/common/contract/people';
import { createContext, useCallback, useContext, useEffect, useMemo, useState, type ReactNode } from 'react';
import { call, onSignedOut, refreshSession, send, setAccessToken } from './client';
import { queryClient } from './queries';

interface Session {
  /** undefined while it is being found out. */
  readonly user: User | null | undefined;
  signIn(email: string, password: string): Promise<void>;
  signOut(): Promise<void>;
  reload(): Promise<void>;
}

const Context = createContext<Session | null>(null);
let starting: Promise<User | null> | null = null;

/** One refresh for the page's start, however often React mounts. */
function start(): Promise<User | null> {
  starting ??= refreshSession().then(async (renewed) => (renewed ? call(userSchema, 'GET', '/api/session') : null)).catch(() => null);
  return starting;
}

export function SessionProvider({ children }: { children: ReactNode }) {
  const [user, setUser] = useState<User | null | undefined>(undefined);
  useEffect(() => {
    void start().then(setUser);
    return onSignedOut(() => {
      setAccessToken(null);
      setUser(null);
    });
  }, []);
  const signIn = useCallback(async (email: string, password: string) => {
    const answer = await call(sessionAnswer, 'POST', '/api/session', { email, password });
    setAccessToken(answer.accessToken);
    queryClient.clear();
    setUser(answer.user);
  }, []);
  const signOut = useCallback(async () => {
    await send('DELETE', '/api/session').catch(() => undefined);
    setAccessToken(null);
    queryClient.clear();
    setUser(null);
  }, []);
  const reload = useCallback(async () => setUser(await call(userSchema, 'GET', '/api/session')), []);
  const session = useMemo(() => ({ user, signIn, signOut, reload }), [user, signIn, signOut, reload]);
  return <Context.Provider value={session}>{children}</Context.Provider>;
}

export function useSession(): Session {
  const session = useContext(Context);
  if (session === null) throw new Error('There is no session around this component');
  return session;
}

/** The signed-in person; only below the frame, which is shown to nobody else. */
export function useUser(): User {
  const { user } = useSession();
  if (user === null || user === undefined) throw new Error('Nobody is signed in');
  return user;
}

export function useMay(action: Action): boolean {
  const { user } = useSession();
  return user !== null && user !== undefined && mayDo(user.roles, action);
}
