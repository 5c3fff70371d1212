/** Whether keys pressed here are meant for what has the focus: a field that is typed in, a dialog, a menu. */
export const takesKeys = (target: EventTarget | null): boolean =>
  (target instanceof HTMLElement &&
    (target.isContentEditable || ['INPUT', 'TEXTAREA', 'SELECT'].includes(target.tagName))) ||
  (target instanceof Element && target.closest('[role="dialog"], [role="menu"]') !== null);
