import { Formula, Method } from "@/app/methods/method";

/** From a change of the calibration to what runs and limits say of it: coverage of cells, steps and moves. */
export function CalibrationMethods() {
  return (
    <>
      <Method
        id="coverage"
        title="Coverage of changed cells"
        source="Multilinear interpolation between axis points, as control units do it: textbook. From 0.1 s of weight on a cell counts as visited, gaps from 1 s or three usual steps, absence of 0.5 s before a new visit, 0.5 s between a channel's own samples: common practice, no source."
        limits="A channel of a log stands for the quantity that the control unit uses; it may be filtered, late or rounded otherwise. Seconds show that a cell was in use, not that its value is right. Channels recorded less often than every 0.5 s beside a faster log tell nothing. Between the points of a rescale or curve axis the weight is shared linearly."
      >
        <p>
          Each sample of a usable run, of any kind, is worth half of the step before it and half of the step
          behind it; a gap belongs to nobody. The axes of a changed table are linked to channels. Where all of
          them are known, the worth is shared among the cells between which the control unit interpolates:
        </p>
        <Formula>share of a cell = product over the axes of (1 − distance / distance of the points)</Formula>
        <p>
          Beyond an end of an axis the last cell holds, so those seconds are its own; they are told apart as
          well. All cells together hold the whole usable time. A cell counts as changed when its value or one
          of its axis points differs, and all of them where the table is new or has another shape.
        </p>
        <p>
          A table that can't be told (an axis without a link, a channel that nobody recorded, a unit that does
          not convert, axis points that fall or repeat) counts as not visited. Values without axes are left
          out of the share and named.
        </p>
      </Method>
      <Method
        id="steps"
        title="Steps and moves in changed tables"
        source="Our own definition. The starting limits, 50 % a step and 20 % a move, are common practice, no source, and switched off until a lead asks for them."
        limits="A large step may be wanted, and a small one may be wrong. Words have no size. A table with other axis points, another shape or another unit than before is not compared cell by cell: the gate then has too little."
      >
        <p>
          A step is the difference between two cells that are neighbours along an axis, of which at least one
          changed. A move is the difference of a cell to the revision that it is held against. Either is taken
          in the table’s own unit or as a share:
        </p>
        <Formula>share = difference / (largest − smallest value of the table before)</Formula>
        <p>
          Where all values before are alike, as with a single value, the share refers to the size of that
          value; where that is zero, there is none.
        </p>
      </Method>
    </>
  );
}
