import { useState } from 'react';
import { ApiError } from '../../client/api';
import { actOnFile, changeRequest, decideItem } from '../../client/requests';
import type { FileActInput, ItemDecisionInput, RequestChangeInput, StaffRequestView } from '../../schemas/request';

/** Does something with a file of the request. */
export type ActOnFile = (key: string, input: FileActInput) => void;

/** A request as the page holds it, with what may be done to it; every answer of the server brings the whole of it anew. */
export function useRequest(start: StaffRequestView) {
  const [request, setRequest] = useState(start);
  const [busy, setBusy] = useState(false);
  const [fault, setFault] = useState<ApiError | null>(null);
  const run = async (work: () => Promise<StaffRequestView>): Promise<boolean> => {
    setBusy(true);
    setFault(null);
    try {
      setRequest(await work());
      return true;
    } catch (error) {
      if (error instanceof ApiError && error.status === 401) {
        location.assign(`/sign-in?next=${encodeURIComponent(location.pathname)}`);
        return false;
      }
      setFault(
        error instanceof ApiError ? error : new ApiError(0, 'unknown', 'This failed on our side. Load the page again.'),
      );
      return false;
    } finally {
      setBusy(false);
    }
  };
  return {
    request,
    busy,
    fault,
    change: (input: RequestChangeInput) => run(() => changeRequest(request, input)),
    decide: (position: number, input: ItemDecisionInput) => run(() => decideItem(request, position, input)),
    actOn: (key: string, input: FileActInput) =>
      run(async () => {
        const { intakeId, request: fresh } = await actOnFile(request, key, input);
        if (intakeId !== null) location.assign(`/engagements/${request.code}/intake/${intakeId}`);
        return fresh;
      }),
  };
}

export type OpenedRequest = ReturnType<typeof useRequest>;
