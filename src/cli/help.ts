import { builders } from "./builders.js";
import { pixelLimit } from "./pngHeader.js";

/** One line for each builder: its name, its values (optional ones in brackets) and what it is. */
function builderLines(): string {
  const forms = Object.entries(builders).map(([name, { parameters, required, summary }]) => ({
    form: [name, ...parameters.map((parameter, index) => (index < required ? parameter : `[${parameter}]`))].join(" "),
    summary,
  }));
  const width = Math.max(...forms.map(({ form }) => form.length));
  return forms.map(({ form, summary }) => `    ${form.padEnd(width)}  ${summary}`).join("\n");
}

const exitCodeLine = "Exit codes: 0 done, 1 failed (files, memory, host), 2 the command has to be written differently, 130 interrupted.";

/** After the list of commands. */
export const programHelp = `
Examples:
  $ tapwise filter leaf.png soft.png --kernel "gaussian 3"
  $ tapwise filter sheets soft --kernel "gaussian 3"
  $ tapwise explain leaf.png --kernel "gaussian 3"
  $ tapwise measure

"tapwise filter --help" lists the kernels and more examples.

${exitCodeLine}
`;

const kernelHelp = `
Kernels (quote them; pass one with --kernel):
  builder  its name and values in order, or name=value: "gaussian 3", "box width=9 height=1"
${builderLines()}
           Values are numbers or fractions (1/3), or x,y for one on each axis: "gaussian 3,1".
           axis: x, y. sampling: point, area. stencil: cross, square, diagonal, mehrstellen, oono-puri.
  taps     rows parted by ";", numbers by blanks or commas, at the end a divisor for all of them:
           "1 2 1; 2 4 2; 1 2 1 /16"
  file     a name that ends in .json: [[1, 2, 1], [2, 4, 2], [1, 2, 1]]
           or { "taps": [[1, 2, 1]], "origin": { "x": 0, "y": 0 } }
  picture  a name that ends in .png: a measured point spread function, 8 or 16 bits, such as a photographed point of
           light. taps = (level - background) / their sum; the level is the mean of the colours, as stored (with the
           sRGB curve it would have to be linear first); alpha does not count.

Borders:
  replicate              a a a | a b c d | d d d      periodic                b c d | a b c d | a b c
  half-sample-symmetric  c b a | a b c d | d c b      whole-sample-symmetric  d c b | a b c d | c b a
  zero                   0 0 0 | a b c d | 0 0 0      "constant v"            v v v | a b c d | v v v
  renormalised           what is outside does not count, the rest weighs more
  A constant is in the image's own units, one for all channels or one each: "constant 255,255,255,0".
`;

export const filterHelp = `${kernelHelp}
Files:
  The result has the source's channels and depth. Palette images and those below 8 bits become 8-bit, a transparent
  colour becomes an alpha channel. Colour-space chunks (gAMA, cHRM, sRGB, iCCP, cICP, mDCV) are carried over unchanged,
  as are text, resolution and Exif; values are filtered as stored unless --light linear is given.
  What was not kept is said on standard error. The result is written beside its place under another name and then
  renamed, so that an error or an interruption leaves no partial file.
  Up to ${pixelLimit} pixels are read.

Folders:
  All files of the folder and of those below it whose names end in .png, each into the same place below the output,
  which is made where it is missing. Hidden names (those that begin with a dot) and links to folders are left out.
  Neither folder may lie in the other. An image that cannot be done is told at the end and stops no other; a full disk
  stops all. After an interruption the same command goes on: results that are newer than their images are not made
  again. What they were made with is kept beside them in .tapwise-batch.json; with other settings the output has to be
  another folder, or --force makes all of them anew.

Examples:
  $ tapwise filter leaf.png soft.png --kernel "gaussian 3"
  $ tapwise filter leaf.png crisp.png --kernel "sharpen 0.8" --force
  $ tapwise filter leaf.png soft.png --kernel "box 31" --light linear --border half-sample-symmetric
  $ tapwise filter leaf.png veins.png --kernel "sobel x" --gain 1/8 --offset 128
  $ tapwise filter leaf.png soft.png --kernel "1 2 1; 2 4 2; 1 2 1 /16" --border-rows zero --border-columns periodic
  $ tapwise filter sheet16.png sheet8.png --kernel "delta" --output-sample u8 --gain 1/257
  $ tapwise filter leaf.png corner.png --kernel psf.json --region 0,0,640,480 --json
  $ tapwise filter leaf.png soft.png --kernel pinhole.png --kernel-background 12 --light linear
  $ tapwise filter sheets soft --kernel "gaussian 3" --profile kiosk.json --threads 4

${exitCodeLine}
`;

export const explainHelp = `${kernelHelp}
Examples:
  $ tapwise explain leaf.png --kernel "disk 12"
  $ tapwise explain --size 1920x1080 --channels 4 --sample u8 --kernel "gaussian 3"
  $ tapwise explain --size 4000x3000 --channels 3 --kernel psf.json --method fft --json
  $ tapwise explain leaf.png --kernel "disk 12" --profile kiosk.json

${exitCodeLine}
`;

export const measureHelp = `
What it prints:
  A line for each kernel size: milliseconds of one run of each method, measured and predicted; which was fastest, which
  one would be chosen, and how much longer the chosen one takes (regret; 0 % where the two are nearer than the noise).
  Then where one method overtakes another, with an interval that covers the noise, and how good the profile is.
  Sizes near a crossing are measured more often than others. Results hold for this machine, this runtime and images like
  these: leave the machine alone meanwhile, and measure on the hardware that you ship to.

The profile:
  What each operation costs here. It does not depend on --size and the options after it, and takes two seconds. With it
  choices fit this machine: --profile of filter and explain, createEngine({ profile }) in a program. It is for the build
  and the threads that it was measured with.

Examples:
  $ tapwise measure
  $ tapwise measure --profile kiosk.json --report kiosk.html
  $ tapwise measure --profile kiosk.json --no-crossover
  $ tapwise measure --size 640x480 --channels 4 --kernels unstructured --seconds 5
  $ tapwise measure --size 4000x3000 --sample f32 --sizes 5,9,17,33,65 --seconds 60 --json

While it measures, a bar on standard error shows the time left. Ctrl-C ends it; nothing is written then.

${exitCodeLine}
`;
