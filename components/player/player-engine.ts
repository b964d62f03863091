import type { ContourData } from "@/components/contour/contour-data";

export interface PlayerTrack {
  /** The recording's id. */
  id: string;
  /** `/api/previews/<recordingId>` */
  url: string;
  title: string;
  titleLang?: string | undefined;
  /** The version and whose it is: "bed, from Ostravelle". */
  below?: string | undefined;
  /** The cue's page. */
  href?: string | undefined;
  durationS: number;
  contour?: ContourData | undefined;
}

export interface PlayerState {
  track: PlayerTrack | null;
  isPlaying: boolean;
  /** The level a person set, 0 to 1; heard as its square. */
  level: number;
  problem: string | null;
  /** Whether the strip of the loaded track is on screen, so that no dock is needed. */
  isStripInSight: boolean;
}

export const FADE_S = 0.03;
const LEVEL_KEY = "sedgewren.level";
const FIRST_LEVEL = 0.4;

export const IDLE: PlayerState = {
  track: null,
  isPlaying: false,
  level: FIRST_LEVEL,
  problem: null,
  isStripInSight: false,
};

export function rememberedLevel(): number {
  try {
    const kept = Number.parseFloat(window.localStorage.getItem(LEVEL_KEY) ?? "");
    return kept >= 0 && kept <= 1 ? kept : FIRST_LEVEL;
  } catch {
    return FIRST_LEVEL;
  }
}

export function rememberLevel(level: number): void {
  try {
    window.localStorage.setItem(LEVEL_KEY, level.toFixed(3));
  } catch {
    // A browser that keeps nothing starts low every time.
  }
}

/** The one player of the site: one audio element, one gain, and whoever listens to its state. */
export class PlayerEngine {
  state: PlayerState = IDLE;
  audio: HTMLAudioElement | null = null;
  private context: AudioContext | null = null;
  private gain: GainNode | null = null;
  private startAtS = 0;
  private sights = new Map<symbol, boolean>();
  private readonly listeners = new Set<() => void>();

  subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  getState = (): PlayerState => this.state;

  get positionS(): number {
    return this.audio?.currentTime ?? 0;
  }

  private set(change: Partial<PlayerState>): void {
    this.state = { ...this.state, ...change };
    for (const listener of this.listeners) listener();
  }

  attach(audio: HTMLAudioElement): () => void {
    this.audio = audio;
    this.set({ level: rememberedLevel() });
    const off = new AbortController();
    const on = (name: string, run: () => void) => audio.addEventListener(name, run, { signal: off.signal });
    on("play", () => this.set({ isPlaying: true }));
    on("pause", () => this.set({ isPlaying: false }));
    on("ended", () => this.set({ isPlaying: false }));
    on("seeking", () => this.mute());
    on("seeked", () => this.fadeIn());
    on("playing", () => this.fadeIn());
    on("error", () => {
      if (!audio.getAttribute("src")) return;
      this.set({
        isPlaying: false,
        problem: "This preview could not be read. Try again, or open the cue's page.",
      });
    });
    return () => off.abort();
  }

  /** Plays `track` from `atS`. Called from a press or a key only: nothing starts by itself. */
  load = (track: PlayerTrack, atS = 0): void => {
    const audio = this.audio;
    if (!audio) return;
    this.mute();
    // Also where the track is loading already: it then begins at the newer place.
    this.startAtS = atS;
    if (this.state.track?.id !== track.id || this.state.problem) {
      audio.src = track.url;
      audio.addEventListener("loadedmetadata", () => this.moveTo(this.startAtS), { once: true });
      this.set({ track, problem: null });
    } else {
      this.moveTo(atS);
    }
    this.play();
  };

  play = (): void => {
    const audio = this.audio;
    if (!audio || !this.state.track) return;
    this.openContext(audio);
    void this.context?.resume();
    if (audio.ended) this.moveTo(0);
    audio.play().catch((cause: unknown) => {
      if (cause instanceof DOMException && cause.name === "AbortError") return;
      this.set({ isPlaying: false, problem: "This preview could not be played. Press it again." });
    });
  };

  pause = (): void => this.audio?.pause();

  toggle = (): void => {
    if (this.state.isPlaying) this.pause();
    else this.play();
  };

  seek = (toS: number): void => {
    if (!this.state.track) return;
    this.startAtS = toS;
    this.moveTo(toS);
  };

  setLevel = (level: number): void => {
    this.set({ level });
    rememberLevel(level);
    if (this.gain && this.context)
      this.gain.gain.setTargetAtTime(level ** 2, this.context.currentTime, FADE_S / 3);
  };

  /** Takes the track off the player. */
  close = (): void => {
    const audio = this.audio;
    if (!audio) return;
    audio.pause();
    audio.removeAttribute("src");
    audio.load();
    this.set({ track: null, isPlaying: false, problem: null });
  };

  /** A strip says whether it shows the loaded track and is on screen. */
  setSight = (strip: symbol, inSight: boolean | null): void => {
    if (inSight === null) this.sights.delete(strip);
    else this.sights.set(strip, inSight);
    const isStripInSight = [...this.sights.values()].some(Boolean);
    if (isStripInSight !== this.state.isStripInSight) this.set({ isStripInSight });
  };

  private moveTo(seconds: number): void {
    const audio = this.audio;
    if (!audio || audio.readyState === 0) return;
    const endS = Number.isFinite(audio.duration) ? audio.duration : (this.state.track?.durationS ?? 0);
    audio.currentTime = Math.min(Math.max(0, seconds), Math.max(0, endS - 0.05));
  }

  private openContext(audio: HTMLAudioElement): void {
    if (this.context) return;
    this.context = new AudioContext({ latencyHint: "playback" });
    this.gain = new GainNode(this.context, { gain: 0 });
    new MediaElementAudioSourceNode(this.context, { mediaElement: audio })
      .connect(this.gain)
      .connect(this.context.destination);
  }

  private mute(): void {
    if (!this.gain || !this.context) return;
    this.gain.gain.cancelScheduledValues(this.context.currentTime);
    this.gain.gain.setValueAtTime(0, this.context.currentTime);
  }

  private fadeIn(): void {
    if (!this.gain || !this.context) return;
    const now = this.context.currentTime;
    this.gain.gain.cancelScheduledValues(now);
    this.gain.gain.setValueAtTime(0, now);
    this.gain.gain.linearRampToValueAtTime(this.state.level ** 2, now + FADE_S);
  }
}
