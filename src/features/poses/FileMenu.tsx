import { DropdownMenu } from 'radix-ui';
import { useRef } from 'react';
import { type Arm, PoseFile } from '../../../shared/api/resources';
import { errorText } from '../../api/client';
import { useImportPoses } from '../../api/poses';
import { ChevronDown } from '../../components/icons';
import { toast } from '../../components/toast';

/** A file as poses, or words for what is wrong with it. */
export function readPoseFile(text: string, fileName: string): PoseFile | string {
  let raw: unknown;
  try {
    raw = JSON.parse(text);
  } catch {
    return `${fileName} is not JSON. Export gives a file in the right form.`;
  }
  const parsed = PoseFile.safeParse(raw);
  if (parsed.success) return parsed.data;
  const issue = parsed.error.issues[0];
  return `${fileName} is not a file of poses: ${issue?.path.join('.') || 'the file'}: ${issue?.message ?? ''}.`;
}

/** What poses travel by: files in and out, and typed values. */
export function FileMenu({ arm, teaches, onType }: { arm: Arm; teaches: boolean; onType: () => void }) {
  const picker = useRef<HTMLInputElement>(null);
  const load = useImportPoses(arm.id);
  const read = async (file: File) => {
    const poses = readPoseFile(await file.text(), file.name);
    if (typeof poses === 'string') return toast(poses);
    load.mutate(poses, {
      onSuccess: (added) => toast(`${added.length} poses imported. They count as declared.`),
      onError: (error) => toast(errorText(error)),
    });
  };
  const exportAs = (format: 'json' | 'csv') => `/api/arms/${arm.id}/poses/export?format=${format}`;
  return (
    <>
      <DropdownMenu.Root modal={false}>
        <DropdownMenu.Trigger className="btn">
          Type or file
          <ChevronDown />
        </DropdownMenu.Trigger>
        <DropdownMenu.Portal>
          <DropdownMenu.Content className="menu-list" align="end" sideOffset={4}>
            <DropdownMenu.Item disabled={!teaches} onSelect={onType}>
              Type a pose…
              {!teaches && <span className="note">teachers do</span>}
            </DropdownMenu.Item>
            <DropdownMenu.Item disabled={!teaches || load.isPending} onSelect={() => picker.current?.click()}>
              Import a file…
              {!teaches && <span className="note">teachers do</span>}
            </DropdownMenu.Item>
            <DropdownMenu.Item asChild>
              <a href={exportAs('json')} download>
                Export JSON<span className="note">to import again</span>
              </a>
            </DropdownMenu.Item>
            <DropdownMenu.Item asChild>
              <a href={exportAs('csv')} download>
                Export CSV<span className="note">to read, in ° and mm</span>
              </a>
            </DropdownMenu.Item>
          </DropdownMenu.Content>
        </DropdownMenu.Portal>
      </DropdownMenu.Root>
      <input
        ref={picker}
        type="file"
        accept="application/json,.json"
        hidden
        aria-label="File of poses"
        onChange={(event) => {
          const file = event.target.files?.[0];
          event.target.value = '';
          if (file) void read(file);
        }}
      />
    </>
  );
}
