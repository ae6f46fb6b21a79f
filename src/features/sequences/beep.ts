let audio: AudioContext | null = null;

/** A short cue before unheld motion. Never the only one: the countdown is also shown. Needs no file. */
export function beep(hertz: number): void {
  try {
    audio ??= new AudioContext();
    if (audio.state === 'suspended') return void audio.resume();
    const tone = audio.createOscillator();
    const volume = audio.createGain();
    tone.frequency.value = hertz;
    volume.gain.setValueAtTime(0.12, audio.currentTime);
    volume.gain.exponentialRampToValueAtTime(0.001, audio.currentTime + 0.18);
    tone.connect(volume).connect(audio.destination);
    tone.start();
    tone.stop(audio.currentTime + 0.2);
  } catch {
    // Without sound the shown countdown serves.
  }
}
