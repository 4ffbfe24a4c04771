import { Formula, Method } from "@/app/methods/method";

/** From the log to power at the wheels and at the crank. */
export function MotionMethods() {
  return (
    <>
      <Method
        id="speed"
        title="Road speed"
        source="Lag by cross-correlation and scale by robust ratios: textbook methods. 2 % as the mark of wheel spin: common practice, no source."
        limits="Without GPS or a speed read off on the road, the scale rests on the tyre marking and is the largest part of the absolute uncertainty. A car with all wheels driven needs GPS to tell wheel spin."
      >
        <p>
          A car tells its speed several times: by an undriven wheel, by GPS, by a driven wheel, by engine
          speed in a fixed gear. Each channel reads the true speed with a scale, a delay and, where driven,
          some slip:
        </p>
        <Formula>reading(t) = scale · v(t − lag) · (1 + slip · F(t))</Formula>
        <p>
          These figures are estimated once for the whole campaign, because it is one car with one set of
          sensors, and the channels are then used together, each by its own noise. Where a driven channel runs
          ahead of the road by more than 2 % beyond the usual creep, the tyres or the clutch slipped: that
          stretch is left out and marked.
        </p>
      </Method>
      <Method
        id="smoothing"
        title="Smoothing, and acceleration from it"
        source="Restricted maximum likelihood for penalised splines: Wahba 1985 (Annals of Statistics 13); Ruppert, Wand and Carroll 2003, chapters 4 and 17 (penalties that vary along the curve), from memory. Expectation-maximisation: Dempster, Laird and Rubin 1977. Cells of speed and least width: our own."
        limits="A feature shorter than the smoothing time is flattened. A log that knows only a slow GPS can’t show a narrow dip in torque. Detail is judged by all runs together: a bend that one run alone has is smoothed like its surroundings."
      >
        <p>
          Differences of neighbouring samples magnify noise, so speed is first drawn through by a smooth curve
          (a penalised spline), and acceleration is its slope. How strongly it smooths is chosen from the data
          by likelihood, once for all pulls of a campaign: side A and side B are never smoothed differently.
        </p>
        <p>
          In the last round the smoothing follows the torque. Where all pulls together show that it bends
          sharply with speed (boost building up, the edge of a changed region) it is weak, elsewhere strong:
          the third derivative of speed is taken as noise whose strength depends on the road speed, in cells
          of 0.8 m/s that lean on their neighbours, and that strength is estimated over the pulls of both
          sides. As the pulls of a side are averaged, each may keep more detail than it could alone: the
          penalty is divided by the number of pulls of the smaller side. A least width, from the rate of the
          fastest channel, keeps single samples from showing.
        </p>
      </Method>
      <Method
        id="segments"
        title="Finding the pull and the coast-down"
        source="Our own rules; the thresholds are common practice without a source."
        limits="Without a pedal or throttle channel, full load is guessed from acceleration. A pull that ends too far below the red line is refused with the reason."
      >
        <p>
          A pull is the stretch at full load in one gear with rising engine speed. The coast-down after it is
          the stretch with the engine off the wheels and the speed falling gently. A change of gear, a lift or
          a gap ends a stretch. What was found is drawn on the run page and can be seen before any result.
        </p>
      </Method>
      <Method
        id="resistance"
        title="What resists: the coast-down"
        source="Resistance as constant, linear and square part: SAE J1263, SAE J2263, ISO 10521 and UN GTR 15 use the same form; 40 CFR 1066.301 asks for both directions. Starting ranges for a passenger car: common practice, no source."
        limits="Wind across the road and gusts inside one run stay in the result as scatter. After averaging both directions, a wind w along the road leaves f2 · w². Twinpass follows no standard's full procedure."
      >
        <p>With the engine off the wheels, only resistance slows the car:</p>
        <Formula>
          −a · (m + ΣJ<sub>w</sub>/r²) = f0 + f1 · v + f2 · (ρ/ρ̄) · (v − d·w)·|v − d·w| + m · g · d · θ(s)
        </Formula>
        <p>
          m is the test mass, ΣJ<sub>w</sub>/r² the inertia of the wheels, ρ the density of the air over the
          mean of the day, d the direction (out +1, back −1), w the wind along the strip, θ the slope at the
          place s. All coast-downs of a road day are fitted together by weighted least squares, with one wind
          for each run and one height profile of the strip. Slope is taken from whatever tells of it: opposite
          directions, accelerometer, altitude.
        </p>
        <p>
          The same force acts during the pull, so the figures of the coast-down carry the drag of the turning
          driveline with them. f1 may come out negative; nothing is clamped. Times of opposite directions are
          averaged harmonically, since force goes with one over time:
        </p>
        <Formula>
          Δt = 2 / (1/Δt<sub>out</sub> + 1/Δt<sub>back</sub>)
        </Formula>
      </Method>
      <Method
        id="power"
        title="Power and torque from motion"
        source="Equation of motion. Mesh efficiency by class of driveline after Joachim, Börner and Kurz (Gear Technology, September 2012). Default inertias: common practice, no source."
        limits="Engine figures are estimates: mesh efficiency and inertias are stated assumptions, not measured. They are the same on both sides, so they hardly touch the difference, but they do move the absolute figure."
      >
        <p>Three quantities, never mixed:</p>
        <Formula>
          tractive: F = m · a + F<sub>resistance</sub>; P = F · v
        </Formula>
        <Formula>
          wheel: F<sub>w</sub> = (m + ΣJ<sub>w</sub>/r²) · a + F<sub>resistance</sub>
        </Formula>
        <Formula>
          engine (estimate): T = F<sub>w</sub> / (k · η) + J<sub>e</sub> · k · a
        </Formula>
        <Formula>P = T · 2π · n / 60</Formula>
        <p>
          k is the way of the crankshaft per metre of road (radians per metre) in the gear driven, η the
          efficiency of the engaged gears, J<sub>e</sub> the inertia of the engine. The difference of two
          revisions is taken on engine torque at equal engine speed; in percent it is the same for power.
        </p>
      </Method>
      <Method
        id="gearing"
        title="Engine speed and road speed"
        source="Rolling circumference 3.05 (radial) or 2.99 (bias) times the diameter: ETRTO as quoted on a public page. Growth with speed: WdK as quoted on a public page. Marking: ISO 4000-1 form."
        limits="A worn tyre rolls 1 to 2 % less than its marking says (common practice, no source). A speed read off on the road wins over the marking."
      >
        <Formula>n = 60 · v · i / CR · (1 + slip)</Formula>
        <p>
          i is the gear ratio times the final drive, CR the rolling circumference. From a marking such as
          225/40 R18 the diameter is two side walls plus the rim; the circumference grows by one
          ten-thousandth for each km/h above 60.
        </p>
      </Method>
      <Method
        id="sprints"
        title="Times between speeds and over distances"
        source="Start of motion at 0.3048 m: SAE J1491 (2006-07), 3.3. Trap speed over the last 20.1168 m: common practice, no source."
        limits="The uncertainty of a time is that of the speed divided by the acceleration: with 0.05 m/s and 3 m/s² about 0.02 s for each end. A slope of 1 % moves 80 to 120 km/h at 3 m/s² by 0.125 s: only the mean of both directions cancels it."
      >
        <p>
          A time runs from one crossing of a speed to the next, linear between samples; a crossing counts when
          the speed stays above for 0.2 s. From rest there are two clocks, and the result says which: from
          first motion, or from 0.3048 m (“ivm”). Distances are the integral of speed. Speed at a distance is
          given as the momentary value and as the mean over the last 20.1168 m (“trap”).
        </p>
      </Method>
    </>
  );
}
