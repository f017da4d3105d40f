import fc from "fast-check";
import { describe, expect, it } from "vitest";
import { changed, type History, redone, startHistory, undone } from "~/lib/history";

const step = (path: string, live = false) => ({ path, live });

describe("undo and redo", () => {
  it("take a drag as one step", () => {
    let history = startHistory(1);
    for (const value of [2, 3, 4]) history = changed(history, value, step("a", true));
    history = changed(history, 5, step("a"));
    expect(undone(history).present).toBe(1);
    expect(redone(undone(history)).present).toBe(5);
  });

  it("take two drags of one field, and one of another, as steps of their own", () => {
    let history = startHistory(1);
    history = changed(changed(history, 2, step("a", true)), 3, step("a"));
    history = changed(changed(history, 4, step("a", true)), 5, step("b", true));
    expect(undone(history).present).toBe(4);
    expect(undone(undone(history)).present).toBe(3);
    expect(undone(undone(undone(history))).present).toBe(1);
  });

  it("lead back to the start and forth to the end, whatever was done", () => {
    const changes = fc.array(fc.record({ value: fc.integer(), path: fc.constantFrom("a", "b"), live: fc.boolean() }), {
      maxLength: 150,
    });
    fc.assert(
      fc.property(changes, (list) => {
        const end = list.reduce((history, { value, ...change }) => changed(history, value, change), startHistory(0));
        let back: History<number> = end;
        for (let count = 0; count < list.length; count++) back = undone(back);
        expect(back.present).toBe(0);
        for (let count = 0; count < list.length; count++) back = redone(back);
        expect(back.present).toBe(end.present);
      }),
    );
  });

  it("forget what was undone once something else is done", () => {
    const history = changed(undone(changed(startHistory(1), 2, step("a"))), 3, step("a"));
    expect(redone(history).present).toBe(3);
  });
});
