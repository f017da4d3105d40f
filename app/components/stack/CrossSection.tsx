import type { LayerDocument } from "@demilune/solver";
import { type KeyboardEvent, type ReactNode, useEffect, useRef, useState } from "react";
import {
  addLayer,
  deleteLayer,
  duplicateLayer,
  type Edit,
  layerName,
  moveLayer,
  newLayer,
  type Refusal,
} from "~/lib/stackEdits";
import { ContactBar, LeaderStack, LightArrows, type PlaceState, PlainStack } from "./StackDrawing";
import { type Picked, type StackProps, samePick } from "./stackProps";

interface CrossSectionProps extends StackProps {
  picked: Picked | null;
  onPick: (picked: Picked) => void;
  /** Presets that can be added; absent where there is no shelf. */
  shelf?: readonly { id: string; name: string; layer: LayerDocument }[];
}

/** From this number of layers on the names stand beside the drawing. */
const leaderFrom = 6;

/** Everything that can be picked, from front to back. */
function placesOf(count: number): Picked[] {
  const inside = Array.from({ length: count }, (_, index): Picked[] => [
    { kind: "layer", index },
    ...(index < count - 1 ? [{ kind: "interface" as const, afterLayer: index }] : []),
  ]);
  return [{ kind: "contact", side: "front" }, ...inside.flat(), { kind: "contact", side: "back" }];
}

/**
 * The layer stack as a cross-section, front at the top. Arrow keys pick, Alt with an arrow moves the picked layer,
 * Delete takes it out; the buttons below do the same.
 */
export function CrossSection({ document, onChange, picked, onPick, readOnly, shelf }: CrossSectionProps) {
  const { layers } = document.stack;
  const frame = useRef<HTMLFieldSetElement>(null);
  const followFocus = useRef(false);
  const [said, setSaid] = useState("");
  const places = placesOf(layers.length);
  const lightSide = document.light.side ?? "front";
  const pickedIndex = picked?.kind === "layer" && picked.index < layers.length ? picked.index : null;

  useEffect(() => {
    if (!followFocus.current || picked === null) return;
    followFocus.current = false;
    frame.current?.querySelector<HTMLElement>("[aria-pressed=true]")?.focus();
  }, [picked]);

  const nameAt = (index: number) => layerName(layers[index], index);
  function apply(edit: Edit | Refusal, path: string, done: string) {
    if ("refused" in edit) return setSaid(edit.refused);
    setSaid([done, ...edit.notes].join(" "));
    onChange(edit.document, { path, live: false, notes: edit.notes });
    followFocus.current = frame.current?.contains(globalThis.document.activeElement) ?? false;
    onPick({ kind: "layer", index: edit.index });
  }
  function add(layer: LayerDocument) {
    apply(addLayer(document, (pickedIndex ?? layers.length - 1) + 1, layer), "add layer", `${layer.name} added.`);
  }
  function duplicate(index: number) {
    apply(duplicateLayer(document, index), "duplicate layer", `${nameAt(index)} duplicated.`);
  }
  function remove(index: number) {
    apply(deleteLayer(document, index), "delete layer", `${nameAt(index)} deleted.`);
  }
  function move(index: number, by: 1 | -1) {
    const target = index + by;
    if (target < 0 || target >= layers.length)
      return setSaid(`${nameAt(index)} is already at the ${by < 0 ? "front" : "back"}.`);
    const done = `${nameAt(index)} moved to place ${target + 1} of ${layers.length}.`;
    apply(moveLayer(document, index, target), "move layer", done);
  }

  function onKeyDown(event: KeyboardEvent) {
    const direction = event.key === "ArrowUp" ? -1 : event.key === "ArrowDown" ? 1 : null;
    if (direction && event.altKey && pickedIndex !== null && !readOnly) {
      event.preventDefault();
      move(pickedIndex, direction);
    } else if (direction && !event.altKey && !event.ctrlKey && !event.metaKey) {
      event.preventDefault();
      const here = places.findIndex((place) => samePick(picked, place));
      followFocus.current = true;
      onPick(places[Math.min(places.length - 1, Math.max(0, here + direction))]);
    } else if (event.key === "Delete" && pickedIndex !== null && !readOnly) {
      event.preventDefault();
      remove(pickedIndex);
    }
  }

  const tabStop = places.some((place) => samePick(picked, place)) ? picked : places[1];
  const place = (one: Picked): PlaceState => ({
    "aria-pressed": samePick(picked, one),
    tabIndex: samePick(tabStop, one) ? 0 : -1,
    onClick: () => onPick(one),
  });
  const none = pickedIndex === null;
  const index = pickedIndex ?? 0;

  return (
    <div>
      <fieldset ref={frame} aria-label="Layer stack, front at the top" onKeyDown={onKeyDown} className="min-w-0">
        {lightSide === "front" && <LightArrows pointing="down" />}
        <ContactBar document={document} side="front" state={place({ kind: "contact", side: "front" })} />
        {layers.length < leaderFrom ? (
          <PlainStack document={document} place={place} />
        ) : (
          <LeaderStack document={document} place={place} picked={picked} />
        )}
        <ContactBar document={document} side="back" state={place({ kind: "contact", side: "back" })} />
        {lightSide === "back" && <LightArrows pointing="up" />}
      </fieldset>
      {!readOnly && (
        <div className="not-printed mt-1 flex flex-wrap gap-x-3 text-small">
          <Command onPress={() => add(newLayer())}>Add</Command>
          <Command disabled={none} onPress={() => duplicate(index)}>
            Duplicate
          </Command>
          <Command disabled={none} keys="Alt+ArrowUp" onPress={() => move(index, -1)}>
            Up
          </Command>
          <Command disabled={none} keys="Alt+ArrowDown" onPress={() => move(index, 1)}>
            Down
          </Command>
          <Command disabled={none} keys="Delete" onPress={() => remove(index)}>
            Delete
          </Command>
          {shelf && shelf.length > 0 && (
            <select
              aria-label="Add a layer from the materials shelf"
              value=""
              onChange={(event) => {
                const material = shelf.find((one) => one.id === event.currentTarget.value);
                if (material) add({ ...material.layer, name: material.layer.name || material.name });
              }}
              className="h-6 w-full rounded-[2px] bg-transparent text-tide"
            >
              <option value="" className="bg-sheet">
                Add from the shelf
              </option>
              {shelf.map((material) => (
                <option key={material.id} value={material.id} className="bg-sheet text-ink">
                  {material.name}
                </option>
              ))}
            </select>
          )}
        </div>
      )}
      <p role="status" className="text-small text-ink-soft">
        {said}
      </p>
    </div>
  );
}

interface CommandProps {
  onPress: () => void;
  disabled?: boolean;
  /** Keys that do the same in the drawing. */
  keys?: string;
  children: ReactNode;
}

function Command({ onPress, disabled, keys, children }: CommandProps) {
  return (
    <button
      type="button"
      disabled={disabled}
      aria-keyshortcuts={keys}
      title={keys?.replace("Arrow", "")}
      onClick={onPress}
      className="action disabled:text-ink-soft disabled:no-underline"
    >
      {children}
    </button>
  );
}
