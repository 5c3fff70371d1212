import { DropdownMenu as Primitive } from 'radix-ui';
import { Fragment, useRef, type ReactElement, type ReactNode } from 'react';
import { classNames } from '../lib/class-names.ts';
import { Icon } from './icon.tsx';

export interface MenuItem {
  readonly label: string;
  readonly onSelect: () => void;
  /** Stands at the right, such as a shortcut. */
  readonly detail?: string;
  readonly danger?: boolean;
  readonly disabled?: boolean;
}
/** One thing to do, or a few of a kind that open beside their name. */
export type MenuAction = MenuItem | { readonly label: string; readonly actions: readonly MenuItem[] };

export interface MenuChoice {
  readonly label: string;
  readonly value: string;
  readonly onChange: (value: string) => void;
  readonly options: readonly { readonly value: string; readonly label: string }[];
}

export interface MenuChecks {
  readonly label: string;
  readonly options: readonly {
    readonly value: string;
    readonly label: string;
    readonly checked: boolean;
    readonly disabled?: boolean;
  }[];
  readonly onToggle: (value: string) => void;
}

/** A group of a menu: things to do, one of several to choose, or some of several, for which the menu stays open. */
export type MenuGroup =
  | { readonly actions: readonly MenuAction[] }
  | { readonly choice: MenuChoice }
  | { readonly checks: MenuChecks };

interface MenuProps {
  /** The button that opens it. */
  readonly trigger: ReactElement;
  readonly groups: readonly MenuGroup[];
  /** Stands above the groups; takes no part in the keyboard's way through the menu. */
  readonly heading?: ReactNode;
  readonly align?: 'start' | 'end';
  /** For a menu that is opened from elsewhere as well, such as by the context-menu key of the row it belongs to. */
  readonly opened?: {
    readonly open: boolean;
    readonly onOpenChange: (open: boolean) => void;
    /** Takes the focus when the menu closes, in its button's place. */
    readonly returnFocus: () => void;
  };
}

const itemLook = classNames(
  'relative flex min-h-28 cursor-pointer items-center gap-12 px-12 text-base text-ink outline-none select-none',
  'data-highlighted:bg-strip data-highlighted:text-strip-ink data-disabled:cursor-default data-disabled:text-ink-3',
);

const contentLook = 'z-50 overflow-y-auto border-1.5 border-ink bg-field py-4 shadow-sheet outline-none';

/** A list of things to do that opens from a button. Groups are parted by a rule. */
export function Menu({ trigger, groups, heading, align = 'start', opened }: MenuProps) {
  // Done once the menu has closed and the focus is back at its button: a dialog that it opens then knows where to
  // return to.
  const chosen = useRef<() => void>(undefined);
  const choose = (item: MenuItem): void => {
    chosen.current = item.onSelect;
  };
  return (
    // Not modal: a modal menu would put a style element into the page, which the content security policy refuses.
    <Primitive.Root modal={false} open={opened?.open} onOpenChange={opened?.onOpenChange}>
      <Primitive.Trigger asChild>{trigger}</Primitive.Trigger>
      <Primitive.Portal>
        <Primitive.Content
          align={align}
          sideOffset={5}
          collisionPadding={8}
          onCloseAutoFocus={(event) => {
            // Somebody who pressed outside has the focus where they want it.
            if (opened !== undefined && document.activeElement === document.body) {
              event.preventDefault();
              opened.returnFocus();
            }
            chosen.current?.();
            chosen.current = undefined;
          }}
          className={classNames(
            contentLook,
            'max-h-(--radix-dropdown-menu-content-available-height) min-w-180',
          )}
        >
          {heading !== undefined && <div className="border-b border-rule-2 px-12 pt-6 pb-9">{heading}</div>}
          {groups.map((group, at) => (
            <Fragment key={groupKey(group, at)}>
              {at > 0 && <Primitive.Separator className="my-4 h-px bg-rule-2" />}
              {'choice' in group ? (
                <MenuChoiceItems choice={group.choice} />
              ) : 'checks' in group ? (
                <MenuCheckItems checks={group.checks} />
              ) : (
                group.actions.map((action) =>
                  'actions' in action ? (
                    <Primitive.Sub key={action.label}>
                      <Primitive.SubTrigger
                        className={classNames(
                          itemLook,
                          'data-[state=open]:bg-strip data-[state=open]:text-strip-ink',
                        )}
                      >
                        <span className="flex-1">{action.label}</span>
                        <Icon name="chevron-right" size={12} />
                      </Primitive.SubTrigger>
                      <Primitive.Portal>
                        <Primitive.SubContent
                          collisionPadding={8}
                          sideOffset={2}
                          className={classNames(
                            contentLook,
                            'max-h-(--radix-dropdown-menu-content-available-height)',
                          )}
                        >
                          {action.actions.map((item) => (
                            <MenuEntry key={item.label} item={item} onChosen={choose} />
                          ))}
                        </Primitive.SubContent>
                      </Primitive.Portal>
                    </Primitive.Sub>
                  ) : (
                    <MenuEntry key={action.label} item={action} onChosen={choose} />
                  ),
                )
              )}
            </Fragment>
          ))}
        </Primitive.Content>
      </Primitive.Portal>
    </Primitive.Root>
  );
}

const groupKey = (group: MenuGroup, at: number): string | number =>
  'choice' in group
    ? group.choice.label
    : 'checks' in group
      ? group.checks.label
      : (group.actions[0]?.label ?? at);

function MenuCheckItems({ checks }: { readonly checks: MenuChecks }) {
  return (
    <>
      <Primitive.Label className="px-12 pt-4 pb-2 text-label text-ink-3">{checks.label}</Primitive.Label>
      {checks.options.map((option) => (
        <Primitive.CheckboxItem
          key={option.value}
          checked={option.checked}
          disabled={option.disabled}
          onCheckedChange={() => checks.onToggle(option.value)}
          onSelect={(event) => event.preventDefault()}
          className={classNames(itemLook, 'pl-32')}
        >
          <Primitive.ItemIndicator className="absolute left-11">
            <Icon name="check" size={14} />
          </Primitive.ItemIndicator>
          {option.label}
        </Primitive.CheckboxItem>
      ))}
    </>
  );
}

function MenuEntry({
  item,
  onChosen,
}: {
  readonly item: MenuItem;
  readonly onChosen: (item: MenuItem) => void;
}) {
  return (
    <Primitive.Item
      disabled={item.disabled}
      onSelect={() => onChosen(item)}
      className={classNames(itemLook, item.danger && 'text-red')}
    >
      <span className="flex-1">{item.label}</span>
      {item.detail !== undefined && <span className="text-note opacity-80">{item.detail}</span>}
    </Primitive.Item>
  );
}

function MenuChoiceItems({ choice }: { readonly choice: MenuChoice }) {
  return (
    <>
      <Primitive.Label className="px-12 pt-4 pb-2 text-label text-ink-3">{choice.label}</Primitive.Label>
      <Primitive.RadioGroup value={choice.value} onValueChange={choice.onChange}>
        {choice.options.map((option) => (
          <Primitive.RadioItem
            key={option.value}
            value={option.value}
            className={classNames(itemLook, 'pl-32')}
          >
            <Primitive.ItemIndicator className="absolute left-11">
              <Icon name="check" size={14} />
            </Primitive.ItemIndicator>
            {option.label}
          </Primitive.RadioItem>
        ))}
      </Primitive.RadioGroup>
    </>
  );
}
