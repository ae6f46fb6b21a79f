/** Times as people say them: "9 min", "today 09:12", "3 Nov 14:05". */
export function ago(atMs: number, nowMs: number = Date.now()): string {
  const minutes = Math.floor((nowMs - atMs) / 60_000);
  if (minutes < 1) return 'just now';
  if (minutes < 60) return `${minutes} min`;
  return when(atMs, nowMs);
}

export function clock(atMs: number): string {
  return new Date(atMs).toLocaleTimeString([], { hour: '2-digit', minute: '2-digit', hour12: false });
}

export function when(atMs: number, nowMs: number = Date.now()): string {
  const date = new Date(atMs);
  const today = new Date(nowMs);
  if (date.toDateString() === today.toDateString()) return `today ${clock(atMs)}`;
  return `${date.toLocaleDateString([], { day: 'numeric', month: 'short' })} ${clock(atMs)}`;
}

/** 13.4 s, 6:04 min. */
export function duration(seconds: number): { value: string; unit: string } {
  if (seconds < 60) return { value: seconds.toFixed(1), unit: 's' };
  const whole = Math.round(seconds);
  const pad = (n: number) => String(n).padStart(2, '0');
  if (whole < 3600) return { value: `${Math.floor(whole / 60)}:${pad(whole % 60)}`, unit: 'min' };
  return { value: `${Math.floor(whole / 3600)}:${pad(Math.floor(whole / 60) % 60)}`, unit: 'h' };
}

export function durationText(seconds: number): string {
  const { value, unit } = duration(seconds);
  return `${value} ${unit}`;
}
