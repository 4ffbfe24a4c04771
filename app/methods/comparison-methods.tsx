import { Formula, Method } from "@/app/methods/method";

/** From runs to a claim: difference, band, planning, gates, fingerprints. */
export function ComparisonMethods() {
  return (
    <>
      <Method
        id="difference"
        title="The difference of two revisions, and its band"
        source="Permutation of residual curves with the largest |t| over the whole curve. Freedman and Lane 1983 permute residuals of the model without the side; here they are those of the whole model, and the level was checked on simulated campaigns. Bonferroni t where a side has three runs. Pooling of neighbouring variances: our own, checked likewise."
        limits="Fewer than three usable runs a side give two curves and no band. The replicate is the run, not the sample: a hundred samples of one pull are one witness. A band of the whole curve is wider than one for a single engine speed, and it is the one that allows a claim “somewhere”. Pooling takes the scatter as even over 800 per minute: where it jumps within that, the band is too narrow on one side of the jump and too wide on the other."
      >
        <p>
          At every engine speed a linear model is fitted to the logarithm of torque, one value a run, with
          what may stand between the runs beside the change itself:
        </p>
        <Formula>log T = mean + side + leg + order (+ road day) + scatter</Formula>
        <p>
          Leg takes wind and slope out, order takes out a drift that is even over the day (heat, fuel, tyres).
          The effect of the side, as percent, is B − A. Around it lies a band that holds the whole curve at
          once:
        </p>
        <Formula>low, high = exp(effect ∓ c · s) − 1</Formula>
        <p>
          s is the standard error. With a handful of runs the scatter at one engine speed is luck, so its
          variance is pooled with that of the engine speeds up to 400 per minute to each side, near ones
          counting more (triangular weights). c is the critical value: the rows of residuals, scaled by √(n/(n
          − p)) for n runs and p columns of the model, are permuted as wholes, the model is fitted again with
          the same pooling, and c is the 95 % point of the largest |t| over the curve in 2000 resamples. A gap
          of a run is filled from its neighbours for this only. Seed and number are stored, so that the same
          input gives the same numbers.
        </p>
        <p>
          Where the whole band lies above zero, a gain is shown; where it lies below, a loss; elsewhere
          nothing is shown, which is not the same as “no difference”. Beside it stands the smallest difference
          that this campaign could have shown with a chance of 80 %.
        </p>
        <p>
          Differences of two peaks or two times carry their own interval (Student’s t of the same model, or
          Welch’s); they are not part of the band.
        </p>
      </Method>
      <Method
        id="twins"
        title="Twins and closure"
        source="Our own names. 2 % as a starting limit: common practice, no source."
        limits="A closure near zero shows that wind and slope were handled, not that they were absent."
      >
        <p>
          A run out and a run back on one revision make a twin. Its closure is the mean over the shared engine
          speeds of back over out, less one, in percent: how well the two directions agree.
        </p>
      </Method>
      <Method
        id="planning"
        title="How many runs, and in which order"
        source="Power of the two-sided t test by the noncentral t distribution (textbook). Repeatability limit: ISO 5725-6, r = 2.8 · s (as quoted publicly)."
        limits="The scatter must be known from earlier runs of the same car and strip. Each further look at the same question raises the chance of a false claim."
      >
        <p>
          Drift that rises evenly cancels when the mean place of both sides is the same: A B B A, each letter
          a twin. What is left over for an order is the mean place of B less the mean place of A:
        </p>
        <Formula>A A B B: 2; A B A B: 1; A B B A: 0</Formula>
        <p>
          To show a difference as large as the scatter of single runs with a chance of 80 %, 17 runs a side
          are needed; for twice the scatter 6, for three times 4. Two single runs that differ by less than 2.8
          times the scatter are no change.
        </p>
      </Method>
      <Method
        id="gates"
        title="When a gate is met"
        source="Decision rule with a guard band, in the sense of ISO/IEC 17025:2017, 7.8.6. No conformity is claimed. Starting limits: our own, edited by a lead for each programme."
        limits="A gate judges what was driven: this fuel, temperature, gear, load and engine speed. It says nothing outside."
      >
        <p>
          A limit is met only if the whole interval lies on its safe side, not met if the whole lies beyond,
          and otherwise there is too little evidence. An absent channel is too little, never a pass. When an
          input changes, a result turns stale until it is computed again. A waiver needs a lead, a reason and
          a name, and stays on the record for ever.
        </p>
      </Method>
      <Method
        id="fingerprints"
        title="Fingerprints and the chain of the ledger"
        source="SHA-256: FIPS 180-4."
        limits="A fingerprint proves that two files are the same bytes. It does not prove who made them or that they are in a car: that takes a load with proof."
      >
        <p>
          Every image, log and docket is known by its SHA-256. Each entry of the ledger holds the digest of
          the one before it, so that a change of the past shows. A release record can be checked without
          Twinpass: hash the file in your hand and compare.
        </p>
      </Method>
    </>
  );
}
