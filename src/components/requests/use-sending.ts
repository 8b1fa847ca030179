import { useEffect, useRef, useState } from 'react';
import { ApiError } from '../../client/api';
import { sendAnswer, type RequestAddress } from '../../client/requests';
import type { ClientRequestView } from '../../schemas/request';

/** A file on its way, and how much of it has gone. */
export interface Sending {
  position: number;
  name: string;
  sent: number;
  bytes: number;
  /** Files behind it in the line. */
  behind: number;
}

/** A file that did not come through. */
export interface NotSent {
  position: number;
  name: string;
  message: string;
  /** Kept, so that it can be sent again with one press. */
  file: File;
}

interface Waiting {
  position: number;
  file: File;
}

/** Sends chosen files one after the other; each answer brings the request anew. */
export function useSending(address: RequestAddress, onAnswer: (request: ClientRequestView) => void) {
  const line = useRef<Waiting[]>([]);
  const stop = useRef<AbortController | null>(null);
  const [sending, setSending] = useState<Sending | null>(null);
  const [notSent, setNotSent] = useState<NotSent[]>([]);
  useEffect(() => {
    if (!sending) return;
    const warn = (event: BeforeUnloadEvent) => event.preventDefault();
    window.addEventListener('beforeunload', warn);
    return () => window.removeEventListener('beforeunload', warn);
  }, [sending]);

  const sendOne = async ({ position, file }: Waiting) => {
    const told = (share: number) =>
      setSending({ position, name: file.name, sent: share * file.size, bytes: file.size, behind: line.current.length });
    stop.current = new AbortController();
    told(0);
    try {
      onAnswer(await sendAnswer(address, position, file, told, stop.current.signal));
    } catch (error) {
      const fault = error instanceof ApiError ? error : null;
      if (fault?.code === 'stopped') line.current = [];
      const message = fault?.status === 401 ? 'You have been signed out. Sign in again, then send it.' : fault?.message;
      const problem = { position, name: file.name, file, message: message ?? 'The file could not be sent. Try again.' };
      setNotSent((all) => [...all, problem]);
    }
  };
  const run = async () => {
    for (let next = line.current.shift(); next; next = line.current.shift()) await sendOne(next);
    stop.current = null;
    setSending(null);
  };
  const send = (position: number, files: Iterable<File>) => {
    const chosen = [...files].map((file) => ({ position, file }));
    if (chosen.length === 0) return;
    setNotSent((all) => all.filter((one) => one.position !== position));
    line.current.push(...chosen);
    if (stop.current === null) void run();
  };
  return { sending, notSent, send, stopSending: () => stop.current?.abort() };
}

export type SendingFiles = ReturnType<typeof useSending>;
