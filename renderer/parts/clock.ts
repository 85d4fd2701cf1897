/** Milliseconds of a recording as 4:09 or 1:02:33. */
export function clock(milliseconds: number): string {
  const seconds = Math.floor(milliseconds / 1000);
  const two = (value: number): string => String(value).padStart(2, '0');
  const hours = Math.floor(seconds / 3600);
  const minutes = Math.floor(seconds / 60) % 60;
  const rest = two(seconds % 60);
  return hours > 0 ? `${hours}:${two(minutes)}:${rest}` : `${minutes}:${rest}`;
}
