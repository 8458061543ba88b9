// A short sound and a short vibration when the run changes: hold reached, going down, paused, over. Each has its visible twin in the
// sentence on top; they can be switched off, and the choice is kept on this phone.

import { useEffect, useRef, useState } from 'react';
import { z } from 'zod';
import { keepDraft, readDraft } from '@/components/runtime/phone-store';
import type { RunPicture } from './run-view';

const Kept = z.boolean();
const draftName = 'cues';

/** Pitch in Hz and vibration in ms of each change. Own choices: up is going up, down is going down. */
const cueOf: Readonly<Record<RunPicture['line'], { hertz: number; ms: number[] } | null>> = {
  rampUp: { hertz: 523, ms: [120] },
  hold: { hertz: 659, ms: [120, 80, 120] },
  rampDown: { hertz: 440, ms: [200] },
  fading: { hertz: 440, ms: [200] },
  paused: { hertz: 392, ms: [200, 100, 200] },
  pausedContact: { hertz: 330, ms: [300, 100, 300, 100, 300] },
  over: { hertz: 349, ms: [400] },
};
const soundSeconds = 0.25;
const loudness = 0.15;

function sound(context: AudioContext, hertz: number): void {
  const tone = context.createOscillator();
  const gain = context.createGain();
  tone.frequency.value = hertz;
  gain.gain.setValueAtTime(loudness, context.currentTime);
  gain.gain.exponentialRampToValueAtTime(0.001, context.currentTime + soundSeconds);
  tone.connect(gain).connect(context.destination);
  tone.start();
  tone.stop(context.currentTime + soundSeconds);
}

export function useCues(accountId: string | null, line: RunPicture['line'] | null) {
  const [isOn, setOn] = useState(true);
  const before = useRef<RunPicture['line'] | null>(null);
  const audio = useRef<AudioContext | null>(null);
  useEffect(() => {
    if (accountId === null) return;
    void readDraft(accountId, draftName, Kept).then((kept) => setOn(kept ?? true));
  }, [accountId]);
  useEffect(() => {
    const last = before.current;
    before.current = line;
    // The first look is no change.
    if (line === null || last === null || last === line || !isOn) return;
    const cue = cueOf[line];
    if (!cue) return;
    if (typeof navigator !== 'undefined' && 'vibrate' in navigator) navigator.vibrate(cue.ms);
    if (typeof AudioContext === 'undefined') return;
    audio.current ??= new AudioContext();
    // Browsers keep a page silent until it was touched; Start was such a touch, a reload was not.
    if (audio.current.state === 'running') sound(audio.current, cue.hertz);
    else void audio.current.resume().catch(() => undefined);
  }, [line, isOn]);
  const change = (next: boolean) => {
    setOn(next);
    if (accountId !== null) void keepDraft(accountId, draftName, next);
  };
  return { isOn, change };
}
