import type { FindingFix } from './finding-item.ts';

/** A fix is shown on the sheet while its button is pointed at or has the focus. */
export function previewHandlers(fix: FindingFix, onPreviewFix: (fixId: string | null) => void) {
  return {
    onPointerEnter: () => onPreviewFix(fix.id),
    onPointerLeave: () => onPreviewFix(null),
    onFocus: () => onPreviewFix(fix.id),
    onBlur: () => onPreviewFix(null),
  };
}
