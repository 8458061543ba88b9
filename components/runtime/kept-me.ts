// Who was signed in when a session began here, kept while it runs: a reload without a network must still lead to Stop. Forgotten when
// the session is over or the person signs out. It opens no door: the server asks for the sign-in cookie at each.

import { openDB, type DBSchema } from 'idb';
import { useEffect, useState } from 'react';
import { Me } from '@/shared/contracts/account';
import { openVault, type Sealed } from './vault';

interface Schema extends DBSchema {
  me: { key: 'running'; value: Sealed<Me> };
}

function store() {
  return openDB<Schema>('rampwell-here-sealed', 1, { upgrade: (fresh) => void fresh.createObjectStore('me') });
}

const vault = () => openVault('rampwell.here');

export async function keepMe(me: Me | null): Promise<void> {
  try {
    const here = await store();
    if (me === null) await here.delete('me', 'running');
    else await here.put('me', await (await vault()).seal(me), 'running');
    here.close();
  } catch {
    // Then a reload without a network asks to wait for it; the stimulator goes on by itself.
  }
}

async function findMe(): Promise<Me | null> {
  try {
    const here = await store();
    const sealed = await here.get('me', 'running');
    const kept = Me.safeParse(sealed && (await (await vault()).open(sealed)));
    here.close();
    return kept.success ? kept.data : null;
  } catch {
    return null;
  }
}

/** Looked up only where the server cannot be asked; undefined while looking. */
export function useKeptMe(isNeeded: boolean): Me | null | undefined {
  const [kept, setKept] = useState<Me | null | undefined>(undefined);
  useEffect(() => {
    if (!isNeeded) return;
    let isHere = true;
    void findMe().then((found) => {
      if (isHere) setKept(found);
    });
    return () => {
      isHere = false;
    };
  }, [isNeeded]);
  return isNeeded ? kept : null;
}
