import { hill } from "@/db/seed/demo-logs";

/** How the images of the story change the torque of the invented car. */
export const EFFECTS = {
  asFound: () => 0,
  midRange: hill(0.055, 2300, 4700),
  topEnd: hill(-0.045, 5400, 7000),
  ignition: (rpm: number) => 0.012 + hill(0.038, 2300, 4600)(rpm),
  visitor: (rpm: number) => 0.03 + hill(0.04, 2300, 4600)(rpm),
};
