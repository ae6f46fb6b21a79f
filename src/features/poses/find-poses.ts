import type { Pose } from '../../../shared/api/resources';

/** Poses that carry the tag and, in name, note, tags or person, every word that was typed. */
export function findPoses(poses: readonly Pose[], text: string, tag: string | null): Pose[] {
  const words = text.toLowerCase().split(/\s+/).filter(Boolean);
  return poses.filter((pose) => {
    if (tag !== null && !pose.tags.includes(tag)) return false;
    const all = [pose.name, pose.note, pose.by, ...pose.tags].join(' ').toLowerCase();
    return words.every((word) => all.includes(word));
  });
}

/** Every tag in use, the most used first. */
export function tagsInUse(poses: readonly Pose[]): string[] {
  const count = new Map<string, number>();
  for (const tag of poses.flatMap((pose) => pose.tags)) count.set(tag, (count.get(tag) ?? 0) + 1);
  return [...count].sort(([a, m], [b, n]) => n - m || a.localeCompare(b)).map(([tag]) => tag);
}
