import { expect, test } from "vitest";
import { Pace } from "@/components/uploads/pace";

test("the time left follows the pace of the last seconds", () => {
  const pace = new Pace();
  pace.add(0, 0);
  pace.add(1_000_000, 1000);
  expect(pace.left(5_000_000)).toBe(4);
  for (let second = 2; second <= 12; second++) pace.add(1_000_000 + (second - 1) * 500_000, second * 1000);
  // The fast first second is out of the window: 0.5 MB a second, 1.5 MB left of 8 MB.
  expect(pace.left(8_000_000)).toBe(3);
});

test("nothing is promised before half a second has been measured, at a standstill or after a pause", () => {
  const pace = new Pace();
  expect(pace.left(100)).toBeNull();
  pace.add(0, 0);
  pace.add(50, 400);
  expect(pace.left(100)).toBeNull();
  pace.add(50, 9000);
  pace.add(50, 10_000);
  expect(pace.left(100)).toBeNull();
  pace.clear();
  expect(pace.left(100)).toBeNull();
});
