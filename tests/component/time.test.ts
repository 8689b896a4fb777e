import { describe, expect, it } from "vitest";
import { agoText, dayText, spanText, timeText } from "../../src/format/time.ts";

describe("times in a viewer's zone", () => {
  it("shows one moment by two clocks", () => {
    expect(timeText("2026-05-14T22:20:00Z", "Europe/Berlin")).toBe("15 May 2026, 00:20");
    expect(timeText("2026-05-14T22:20:00Z", "America/New_York")).toBe("14 May 2026, 18:20");
    expect(dayText("2026-05-14T22:20:00Z", "Europe/Berlin")).toBe("15 May 2026");
  });
  it("tells how long ago in the largest unit that fits", () => {
    const now = Date.parse("2026-05-14T12:00:00Z");
    expect(agoText("2026-05-14T11:59:40Z", now)).toBe("just now");
    expect(agoText("2026-05-14T09:00:00Z", now)).toBe("3 hours ago");
    expect(agoText("2026-05-11T09:00:00Z", now)).toBe("3 days ago");
  });
  it("writes spans as people say them", () => {
    expect(spanText(0)).toBe("under 0.1 s");
    expect(spanText(0.2134)).toBe("0.21 s");
    expect(spanText(41.4)).toBe("41 s");
    expect(spanText(185)).toBe("3 min 5 s");
  });
});
