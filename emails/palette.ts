// The design's light colours for markup that is filled into a mail; their dark twins stand in templates/partials/head.mjml by class.

export const palette = {
  ink: "#14202B",
  quiet: "#51606C",
  edge: "#74828D",
  rule: "#D2DAD7",
  pass: "#1F7355",
  near: "#734900",
  fail: "#A9243C",
  bare: "#6A32A8",
} as const;
