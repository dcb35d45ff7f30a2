import { useRef, useState } from 'react';
import type { materialKinds, Talk } from '@shared/features/talks/talks.contract';
import { MAX_UPLOAD } from '@shared/features/talks/talks-materials.contract';
import { formatBytes } from '@/lib/format';
import { fieldErrors, sentenceOf } from '@/lib/problem';
import { useUpload } from './talks.queries';

export interface Travelling {
  name: string;
  bytes: number;
  share: number;
  /** Milliseconds since 1970. */
  startedAt: number;
}

/** One upload at a time, with progress and a way to stop. */
export function useMaterialUpload(talk: Talk, kind: (typeof materialKinds)[number]) {
  const upload = useUpload();
  const [travelling, setTravelling] = useState<Travelling>();
  const [error, setError] = useState<string>();
  const stopper = useRef<AbortController>(undefined);

  const start = (file: File) => {
    setError(undefined);
    if (file.size > MAX_UPLOAD)
      return setError(
        `${file.name} has ${formatBytes(file.size)}; at most ${formatBytes(MAX_UPLOAD)} are taken.`,
      );
    if (file.size === 0) return setError(`${file.name} is empty.`);
    stopper.current = new AbortController();
    setTravelling({ name: file.name, bytes: file.size, share: 0, startedAt: Date.now() });
    upload.mutate(
      {
        talk,
        kind,
        file,
        signal: stopper.current.signal,
        onProgress: (share) => setTravelling((now) => now && { ...now, share }),
      },
      {
        onError: (failure) => {
          if (failure.name === 'AbortError') return;
          setError(fieldErrors(failure).file ?? sentenceOf(failure));
        },
        onSettled: () => setTravelling(undefined),
      },
    );
  };
  return { start, stop: () => stopper.current?.abort(), travelling, error };
}
