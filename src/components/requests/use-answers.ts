import { useState } from 'react';
import { ApiError } from '../../client/api';
import { answerInWords, removeAnswer } from '../../client/requests';
import type { ClientFileView, ClientItemView, ClientRequestView } from '../../schemas/request';

interface Fault {
  position: number | null;
  error: ApiError;
}

/** Removing files and answering in words; each answer of the server brings the request anew. */
export function useAnswers(request: ClientRequestView, onAnswer: (request: ClientRequestView) => void) {
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<Fault | null>(null);
  const run = async (position: number | null, work: () => Promise<ClientRequestView>) => {
    setBusy(true);
    setFault(null);
    try {
      onAnswer(await work());
    } catch (error) {
      const known =
        error instanceof ApiError ? error : new ApiError(0, 'unknown', 'This failed on our side. Try again.');
      if (known.status === 401) location.assign(`/sign-in?next=${encodeURIComponent(location.pathname)}`);
      setFault({ position, error: known });
    } finally {
      setBusy(false);
    }
  };
  const placeOf = (file: ClientFileView) => request.items.find(({ files }) => files.includes(file))?.position ?? null;
  const at = ({ position }: ClientItemView) => (fault?.position === position ? fault.error : null);
  return {
    busy,
    remove: (file: ClientFileView) => void run(placeOf(file), () => removeAnswer(request, file.key, file.version)),
    answer: ({ position, version }: ClientItemView, words: string | null) =>
      void run(position, () => answerInWords(request, position, { words, version })),
    fieldFault: (item: ClientItemView, field: string) => at(item)?.fields[field]?.[0],
    /** What went wrong with an item, where no field tells it. */
    faultAt: (item: ClientItemView) => {
      const error = at(item);
      return error && Object.keys(error.fields).length === 0 ? error.message : null;
    },
  };
}

export type AnswerActs = ReturnType<typeof useAnswers>;
