// Curves fetched after the page, and again, finer, where the figure is zoomed.
import { useEffect, useRef } from "react";
import { useFetcher } from "react-router";
import type { Band } from "~/rf/index";

/** ms a zoom has to rest before finer curves are fetched. */
const ZOOM_RESTS = 250;

/**
 * What an address answers; while a zoom's finer answer is on its way the last one stays, but never that of another address.
 *
 * @param address with its query, without a window
 * @param initial what came with the page: then nothing is fetched until the figure is zoomed
 */
export function useCurves<Data>(
  address: string,
  window: Band | undefined,
  initial: Data | undefined,
): Data | undefined {
  const { load, data } = useFetcher<Data>({ key: address });
  const asked = useRef<string>(undefined);
  const whole = window ? `${address}&from=${Math.round(window[0])}&to=${Math.round(window[1])}` : address;
  const isHere = initial !== undefined && window === undefined;
  useEffect(() => {
    if (isHere || asked.current === whole) return;
    const rest = asked.current?.startsWith(address) ? ZOOM_RESTS : 0;
    const timer = setTimeout(() => {
      asked.current = whole;
      void load(whole);
    }, rest);
    return () => clearTimeout(timer);
  }, [address, whole, isHere, load]);
  return (data as Data | undefined) ?? initial;
}
