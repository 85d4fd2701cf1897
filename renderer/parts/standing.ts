/**
 * Puts a control back to what stands, each time that what stands was asked for anew: what was typed
 * or chosen may have been undone before it ever came back. A box in which somebody types is left
 * alone. `asked` is whatever comes anew with the answer.
 */
export function standing(
  _asked: unknown,
  value: string | boolean,
): (control: HTMLInputElement | HTMLSelectElement) => void {
  return (control) => {
    if (typeof value === 'boolean') (control as HTMLInputElement).checked = value;
    else if (control instanceof HTMLSelectElement || control !== document.activeElement) {
      if (control.value !== value) control.value = value;
    }
  };
}
