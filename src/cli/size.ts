import { wholeNumbers } from "./numbers.js";

/** Width and height of an image, such as 1920x1080. @throws ConvolutionError `usage` */
export function readSize(text: string): { width: number; height: number } {
  const [width, height] = wholeNumbers(text, 2, "--size", "width and height, such as 1920x1080");
  return { width: width!, height: height! };
}
