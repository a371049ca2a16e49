/** Cells that a random log is made of, chosen to collide and to lie on the edges of the rules. */

export const UNITS = ["a", "b", "c", "d", "7", "a, b", 'say "hi"', "Ünit", "two\nlines", "tab\there"];

export const TEXTS = [
  "NO",
  "no",
  "SE",
  "NA",
  "null",
  "true",
  "T",
  "Yes",
  "1",
  "1.0",
  "01",
  "0",
  "FALSE",
  "n",
  "a%b",
  "a_b",
  "[x]",
  "x",
  "xyx",
  "it's",
  "a, b",
  'say "hi"',
  "two\nlines",
  "tab\there",
  "æøå",
  "😀",
  "😀",
  "ｚ",
  " ",
  " x",
  "0.1234567891",
  "1e400",
  "-3",
];

export const NUMBERS = [
  "0",
  "1",
  "1.0",
  "01",
  "2",
  "2.5",
  "3",
  "7.25",
  "40",
  "-1",
  "-2.50",
  "-0",
  "+3",
  "1e2",
  "25e-2",
  "1e+1",
  "0.1",
  "0.2",
  "0.3",
];

/** Numbers that strain the nine places and the eighteen digits. */
export const EDGE_NUMBERS = [
  "0.0000000005",
  "-0.0000000005",
  "0.0000000004",
  "1.0000000015",
  "123456789.123456789",
  "0.1234567891",
  "1e-400",
  "99999999999999.5",
  "999999999999999999",
  "-999999999999999999.999999999",
  "1e17",
  "1000000000.000000001",
];

export const NOT_NUMBERS = [
  "abc",
  "1,5",
  "NA",
  "null",
  " 1",
  "1 ",
  ".5",
  "5.",
  "0x10",
  "Infinity",
  "NaN",
  "1_000",
  "true",
  "--1",
  "1E2",
  "1e",
  "٣",
];

export const OUT_OF_RANGE = ["1e18", "-1e18", "999999999999999999.9999999995", "1e400"];

export const BAD_TIMES = [
  "yesterday",
  "2026-02-30",
  "2026-13-01",
  "2026-03-10T24:00",
  "2026-03-10T10:60",
  "2026-3-1",
  "10:15",
  "2026-03-10T10",
  " 2026-03-10",
  "2026-03-10T10:15:30 +01:00",
  "1773100800.5",
  "2026-03-10T10:15:60",
  "10/03/2026",
  "2026-03-10T10:15+0",
];

/** Where clocks change, with local times that occur twice, do not exist, or begin a day. */
export const ZONES: readonly { readonly zone: string; readonly anchor: string; readonly locals: readonly string[] }[] =
  [
    {
      zone: "UTC",
      anchor: "2026-03-10T00:00:00Z",
      locals: ["2026-03-10", "2026-03-10 00:00", "2026-03-09T23:59:59.999999"],
    },
    {
      zone: "Europe/Oslo",
      anchor: "2026-03-29T01:00:00Z",
      locals: ["2026-03-29", "2026-03-29T02:30", "2026-03-29 02:00", "2026-03-29T03:00"],
    },
    {
      zone: "Europe/Oslo",
      anchor: "2025-10-26T01:00:00Z",
      locals: ["2025-10-26", "2025-10-26T02:30", "2025-10-26T02:00", "2025-10-26T03:00"],
    },
    {
      zone: "America/St_Johns",
      anchor: "2010-03-14T03:31:00Z",
      locals: ["2010-03-14", "2010-03-14T00:30", "2010-03-14 00:00:59", "2010-03-14T01:01"],
    },
    {
      zone: "America/St_Johns",
      anchor: "2010-11-07T02:31:00Z",
      locals: ["2010-11-07", "2010-11-06T23:30", "2010-11-07T00:00:30", "2010-11-07 00:01"],
    },
    {
      zone: "America/St_Johns",
      anchor: "2026-03-08T05:30:00Z",
      locals: ["2026-03-08", "2026-03-08T02:30", "2026-03-08T03:00"],
    },
    {
      zone: "Pacific/Apia",
      anchor: "2011-12-30T10:00:00Z",
      locals: ["2011-12-30", "2011-12-30T12:00", "2011-12-31", "2011-12-29T23:59:59.999999"],
    },
    {
      zone: "Pacific/Apia",
      anchor: "2011-12-30T10:00:00Z",
      locals: ["2011-12-30", "2011-12-30T12:00", "2011-12-29", "2011-12-29T23:59:59.999999"],
    },
    {
      zone: "Pacific/Apia",
      anchor: "2012-03-31T14:00:00Z",
      locals: ["2012-04-01", "2012-04-01T03:30", "2012-04-01 04:00"],
    },
  ];
