import { describe, expect, it } from "vitest";
import { requiredGap, selectorRank, type RuleSide } from "../../../src/core/gaps/rules.ts";
import { rulesSchema } from "../../../src/core/layout/schema.ts";

const side = (rest: Partial<RuleSide>): RuleSide => ({ key: "x", kind: "other", group: "", hot: false, limited: false, ...rest });
const muffler = side({ key: "muffler-left", kind: "muffler", group: "exhaust", hot: true });
const loom = side({ key: "loom", kind: "harness", limited: true });
const rules = (...pairs: [string, string, number, string?][]) => rulesSchema.parse({ gap: 10, pairs: pairs.map(([a, b, gap, why = ""]) => ({ between: [a, b], gap, why })) });
const need = (moving: boolean, ...pairs: [string, string, number, string?][]) => requiredGap(rules(...pairs), muffler, loom, moving);

describe("selectorRank", () => {
  it.each([
    ["key:muffler-left", 3], ["kind:muffler", 2], ["group:exhaust", 2], ["hot", 1], ["any", 0], ["limited", -1], ["key:muffler", -1], ["kind:exhaust", -1], ["group:muffler", -1], ["moving", -1],
  ])("of %s for a hot muffler of the exhaust is %d", (selector, rank) => expect(selectorRank(selector, muffler, false)).toBe(rank));
  it("of moving is 1 where the two move against each other", () => expect(selectorRank("moving", muffler, true)).toBe(1));
  it("never takes a missing group for a group without a name", () => expect(selectorRank("group:", side({}), false)).toBe(-1));
});

describe("requiredGap", () => {
  it("is the default where no rule matches", () => {
    expect(need(false)).toEqual({ gap: 10, why: "default gap", overruled: [] });
    expect(need(false, ["kind:tank", "any", 50])).toMatchObject({ gap: 10 });
  });
  it("is a rule's own, also where it asks for less than the default", () => expect(need(false, ["any", "any", 3])).toMatchObject({ gap: 3 }));
  it("compares the larger of the two ranks first: key and any beats kind and kind", () =>
    expect(need(false, ["kind:muffler", "kind:harness", 60], ["key:loom", "any", 20, "tight corner"])).toEqual({ gap: 20, why: "tight corner", overruled: [{ gap: 60, why: "kind:muffler to kind:harness" }] }));
  it("then the smaller: kind and word beats kind and any", () => expect(need(false, ["kind:harness", "any", 60], ["kind:harness", "hot", 30])).toMatchObject({ gap: 30, overruled: [{ gap: 60 }] }));
  it("then the larger gap, then the first listed", () => {
    expect(need(false, ["hot", "limited", 75, "first"], ["limited", "hot", 100, "second"])).toMatchObject({ gap: 100, why: "second", overruled: [] });
    expect(need(false, ["hot", "any", 50, "first"], ["limited", "any", 50, "second"])).toMatchObject({ gap: 50, why: "first" });
  });
  it("takes the way round that is stronger", () => {
    // both are hot; one is named: (key, hot) and not (any rule's weaker way)
    const pipe = side({ key: "pipe", kind: "exhaust", hot: true });
    expect(requiredGap(rules(["hot", "key:pipe", 40], ["kind:muffler", "kind:exhaust", 5]), muffler, pipe, false)).toMatchObject({ gap: 40, overruled: [] });
  });
  it("needs both selectors to match different sides", () => expect(need(false, ["hot", "key:muffler-left", 90])).toMatchObject({ gap: 10 }));
  it("asks for moving only where they do", () => {
    expect(need(false, ["moving", "any", 25])).toMatchObject({ gap: 10 });
    expect(need(true, ["moving", "any", 25])).toMatchObject({ gap: 25 });
  });
  it("names as overruled only what is weaker and asks for more", () =>
    expect(need(true, ["hot", "limited", 75, "w"], ["kind:muffler", "kind:harness", 50, "k"], ["any", "any", 20, "a"], ["moving", "any", 80, "m"]).overruled).toEqual([{ gap: 75, why: "w" }, { gap: 80, why: "m" }]));
  it("is the same whichever of the two comes first", () => {
    const all = rules(["hot", "limited", 75], ["kind:harness", "any", 33], ["group:exhaust", "any", 34], ["any", "key:loom", 12]);
    expect(requiredGap(all, muffler, loom, true)).toEqual(requiredGap(all, loom, muffler, true));
  });
});
