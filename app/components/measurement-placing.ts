// Placing sweeps under a unit and a temperature: what is selected, what is on its way, what was done last and can be undone.
import { useState } from "react";
import { useFetcher } from "react-router";
import type { FieldErrors } from "~/forms/form";
import type { Place } from "./measurement-groups";

/** A sweep under the id it has from now on, and where it was before. */
export interface PlacedFile {
  readonly publicId: string;
  readonly from: { readonly serial: string | null; readonly temperature: string | null };
}

/** What the page's action answers to a post that says `stay`. */
export interface PlacingAnswer {
  readonly errors: FieldErrors;
  readonly placed?: readonly PlacedFile[];
  readonly place?: Place;
  /** Labels were put back. */
  readonly labelled?: boolean;
}

/** Fields of the bar; which one is to be typed in first. */
export type PlaceField = "place" | "placeSerial" | "placeTemperature";

export interface Asking {
  readonly field: PlaceField;
  /** Typed in already: the unit a file was dropped on. */
  readonly serial: string;
}

interface Undone {
  readonly ids: readonly string[];
  readonly place: Place;
}

export interface Placing {
  readonly selected: ReadonlySet<string>;
  readonly select: (ids: readonly string[], isTicked: boolean) => void;
  /** Opens the bar for these, with the cursor in a field. */
  readonly ask: (ids: readonly string[], asking: Asking) => void;
  readonly asking: Asking | null;
  readonly clear: () => void;
  readonly place: (ids: readonly string[], place: Place) => void;
  /** Sends what the bar's fields say. */
  readonly send: (form: FormData) => void;
  readonly undo: () => void;
  readonly redo: () => void;
  readonly answer: PlacingAnswer | undefined;
  readonly undone: Undone | null;
  /** Sweeps on their way to another place. */
  readonly isMoving: (id: string) => boolean;
}

/** @returns the state of a list's placing; its answers come from the page's own action */
export function usePlacing(): Placing {
  const fetcher = useFetcher<PlacingAnswer>();
  const [selected, setSelected] = useState<ReadonlySet<string>>(new Set());
  const [asking, setAsking] = useState<Asking | null>(null);
  const [undone, setUndone] = useState<Undone | null>(null);
  const [seen, setSeen] = useState<PlacingAnswer>();
  const answer = fetcher.data;
  if (answer !== seen) {
    setSeen(answer);
    if (answer?.placed) {
      setSelected(new Set());
      setAsking(null);
    }
  }
  const clear = () => {
    setSelected(new Set());
    setAsking(null);
  };
  const post = (values: Record<string, string>) => void fetcher.submit({ ...values, stay: "1" }, { method: "post" });
  const place = (ids: readonly string[], { serial = "", temperature = "" }: Place) => {
    const ticked = Object.fromEntries(ids.map((id) => [`select.${id}`, "on"]));
    post({ intent: "place", ...ticked, placeSerial: serial, placeTemperature: temperature });
  };
  return {
    selected,
    asking,
    answer,
    undone,
    clear,
    place,
    select: (ids, isTicked) => {
      const next = new Set(selected);
      for (const id of ids)
        if (isTicked) next.add(id);
        else next.delete(id);
      setSelected(next);
    },
    ask: (ids, wanted) => {
      setSelected(new Set(ids));
      setAsking(wanted);
    },
    send: (form) => {
      form.set("stay", "1");
      void fetcher.submit(form, { method: "post" });
    },
    undo: () => {
      if (!answer?.placed || !answer.place) return;
      setUndone({ ids: answer.placed.map(({ publicId }) => publicId), place: answer.place });
      const labels = answer.placed.flatMap(({ publicId, from }) => [
        [`serial.${publicId}`, from.serial ?? ""] as const,
        [`temperature.${publicId}`, from.temperature ?? ""] as const,
      ]);
      post({ intent: "labels", ...Object.fromEntries<string>(labels) });
    },
    redo: () => {
      if (undone) place(undone.ids, undone.place);
    },
    isMoving: (id) => fetcher.formData?.has(`select.${id}`) === true && fetcher.formData.get("intent") === "place",
  };
}
