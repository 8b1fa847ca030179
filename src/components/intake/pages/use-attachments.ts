import { useCallback, useEffect, useState } from 'react';
import { ApiError } from '../../../client/api';
import { fetchAttachments } from '../../../client/attachments';
import type { AttachmentView } from '../../../schemas/attachment';

/** Pages of an engagement as they stand, and the verbs that change them here after the server did. */
export interface Attachments {
  all: AttachmentView[];
  loaded: boolean;
  fault: string | null;
  /** Carries a change out; afterwards the list has what the server answered. Tells whether it went well. */
  change(work: Promise<AttachmentView>): Promise<boolean>;
  put(attachment: AttachmentView): void;
  say(fault: string | null): void;
}

const failed = 'This failed on our side. Load the page again.';

/** Fetches the pages of an engagement once and keeps up with what is done to them here. */
export function useAttachments(code: string): Attachments {
  const [all, setAll] = useState<AttachmentView[]>([]);
  const [loaded, setLoaded] = useState(false);
  const [fault, say] = useState<string | null>(null);
  const tell = useCallback((error: unknown) => say(error instanceof ApiError ? error.message : failed), []);
  useEffect(() => {
    fetchAttachments(code).then((list) => {
      setAll(list);
      setLoaded(true);
    }, tell);
  }, [code, tell]);
  const put = useCallback(
    (one: AttachmentView) =>
      setAll((before) =>
        [...before.filter(({ id }) => id !== one.id), one]
          .filter(({ removed }) => !removed)
          .sort((a, b) => a.id - b.id),
      ),
    [],
  );
  const change = useCallback(
    async (work: Promise<AttachmentView>) => {
      say(null);
      try {
        put(await work);
        return true;
      } catch (error) {
        tell(error);
        return false;
      }
    },
    [put, tell],
  );
  return { all, loaded, fault, change, put, say };
}
