const words = (i: number) => `Correction of share ${i % 97} above the threshold of stage ${i % 13}`;

/** One invented thing of a description each, with the tool data that takes up most of a real file. */
function writtenThings(i: number): string {
  const address = (0x80000000 + i * 64).toString(16).toUpperCase();
  return `
    /begin CHARACTERISTIC Unit.Part${i % 50}.Share_${i}
      "${words(i)}"
      MAP 0x${address} Layout.Map${i % 9} 0 Scale_${i % 40} -40.5 1.5E3
      EXTENDED_LIMITS -100 6553.5
      FORMAT "%7.3"
      /begin AXIS_DESCR STD_AXIS speed_rpm Scale_${(i + 1) % 40} 16 0 8000
      /end AXIS_DESCR
      /begin AXIS_DESCR COM_AXIS load_percent Scale_${(i + 2) % 40} 12 0 100
        AXIS_PTS_REF Axis_${i % 200}
      /end AXIS_DESCR
      /begin IF_DATA ROAD
        LINK_MAP "Unit.Part${i % 50}.Share_${i}" 0x${address} 0x0 0 0x0 1 0x8F 0x0
        DISPLAY 0 -40 1500
        /begin EVENT CYCLE 0x${(i % 256).toString(16)} /end EVENT
      /end IF_DATA
    /end CHARACTERISTIC
    /begin MEASUREMENT signal_${i} "${words(i + 5)}" UWORD Scale_${i % 40} 1 0 0 65535
      ECU_ADDRESS 0x${address} /* in memory that forgets */
      FORMAT "%5.1"
      /begin IF_DATA ROAD
        /begin DAQ_EVENT FIXED_EVENT_LIST EVENT 0x1 /end DAQ_EVENT
      /end IF_DATA
    /end MEASUREMENT
`;
}

/** A description of at least `bytes`, all of it invented, as one block of bytes that never was a string. */
export function writtenDescription(bytes: number): { bytes: Uint8Array; characteristics: number } {
  const head =
    'ASAP2_VERSION 1 71\n/begin PROJECT Bench ""\n/begin MODULE Unit ""\n/begin MOD_COMMON "" BYTE_ORDER MSB_LAST /end MOD_COMMON\n';
  const room = Buffer.alloc(bytes + 10_000);
  let size = room.write(head, 0);
  let things = 0;
  for (; size < bytes; things++) size += room.write(writtenThings(things), size);
  size += room.write("/end MODULE\n/end PROJECT\n", size);
  return { bytes: new Uint8Array(room.buffer, room.byteOffset, size), characteristics: things };
}
