import { Method } from "@/app/methods/method";

/** What is looked for in each run, from which limits on, and what follows. */
export function JudgingMethods() {
  return (
    <Method
      id="judging"
      title="Judging each run"
      source="Repeated samples above 30 %: quantisation is not white then, our own computation. Standard pressure of a height: ISO 2533, from memory. All other limits: common practice, no source."
      limits="Clear limits find clear faults. A mass typed 10 % wrong changes every force by as much and leaves no trace in the log; only what no road car has is called implausible. A brake that drags from beginning to end looks like rolling resistance."
    >
      <p>
        Every log is questioned before its figures are believed. A finding has one of three consequences. It{" "}
        <strong>refuses</strong> the run: no road speed, under 5 new speed values a second, under 30 samples
        or 40 % of the way to the red line, speeds that differ by more than 15 % and so by their unit. It{" "}
        <strong>leaves a part out</strong> of torque, speed or losses: wheel spin, clutch slip, a lift and the
        half second after it, a gap, a speed that stands still while the car does not, braked parts of a
        coast-down, an altitude that jumps, an accelerometer turned round. Or it <strong>warns</strong>, and
        the figures stay.
      </p>
      <p>
        A brake is known by deceleration: most of a coast-down agrees on one free roll, −a = c0 + c2 · v².
        What slows the car by 0.3 m/s² more, and comes or goes within 0.6 s, is no hill and no gust.
      </p>
      <p>
        Warned of are: fewer than 10 rows a second, uneven or changing steps, values repeated in more than 30
        % of a pull; a wheel scale more than 4 % from GPS, one that changes by 1.5 % within a run or 1 %
        between runs, an offset of GPS beyond 0.6 s or not to be settled; positions that are 3 % farther apart
        than speed times time; a gear, leg, ratio, red line, tyre, pressure or temperature that the log
        contradicts; a drag area outside 0.3 to 1.8 m², a rolling resistance outside 0.4 to 3 % of the weight,
        a torque that the displacement can’t give; and what nothing in the log checks.
      </p>
    </Method>
  );
}
