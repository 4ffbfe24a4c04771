import { Notice } from "@/components/ui/status/notice";

/** What Twinpass does not decide; shown where something is decided and on the record of it. */
export function Cautions() {
  return (
    <Notice tone="caution" title="Before it is driven">
      A changed calibration can destroy an engine and can make a vehicle illegal on the road: emissions and
      noise rules, type approval, insurance and warranty differ by place. Twinpass measures and records. It
      approves nothing in law; check your local code and use licensed practice.
    </Notice>
  );
}
