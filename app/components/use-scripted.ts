// Whether script has taken over the page: false in what the server sent, so that both draw the same at first.
import { useSyncExternalStore } from "react";

const noSubscription = () => () => undefined;

export const useScripted = (): boolean =>
  useSyncExternalStore(
    noSubscription,
    () => true,
    () => false,
  );
