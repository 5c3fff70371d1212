import { useId, type ReactNode } from 'react';

interface SettingsSectionProps {
  readonly title: string;
  readonly about?: ReactNode;
  readonly children: ReactNode;
}

/** One thing to set of a workspace: what it is at the left, its cells at the right. */
export function SettingsSection({ title, about, children }: SettingsSectionProps) {
  const id = useId();
  return (
    <section
      aria-labelledby={id}
      className="grid grid-cols-[260px_minmax(0,520px)] gap-x-28 gap-y-10 border-t border-ink py-20 max-md:grid-cols-1"
    >
      <div>
        <h2 id={id} className="text-section font-semibold">
          {title}
        </h2>
        {about !== undefined && <div className="mt-4 text-base text-ink-2">{about}</div>}
      </div>
      <div className="min-w-0">{children}</div>
    </section>
  );
}
