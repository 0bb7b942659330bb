import { ChainSettings } from '#contract/studies.ts';
import { Anchor, Intensity, Regime } from '#contract/scenarios.ts';
import { CHAIN_CHOICES, WIND_CHOICES } from '#contract/wind-choice-catalogue.ts';
import { WindChoices, type Choice } from '#contract/wind-choices.ts';

export type SettingKey = keyof WindChoices | 'intensity' | 'anchor' | 'mesovortices' | 'regime';
export interface Setting {
  key: SettingKey;
  value: string;
}

export const DEFAULT_SETTINGS: ChainSettings = ChainSettings.parse({});
/** Every setting in words, in the order they are listed. */
export const CHOICES: readonly Choice<SettingKey>[] = [...CHAIN_CHOICES, ...WIND_CHOICES];

export const isSettingKey = (text: string): text is SettingKey => CHOICES.some(({ key }) => key === text);

/** Values of a setting as words; the layer of vortices is on or off. */
export const valueOf = (settings: ChainSettings, key: SettingKey): string => {
  if (key === 'intensity' || key === 'anchor' || key === 'regime') return settings[key];
  if (key === 'mesovortices') return settings.mesovortices ? 'on' : 'off';
  return settings.wind[key];
};

/** The settings with one changed; null when there is no such value. */
export const withValue = (settings: ChainSettings, key: string, value: string): ChainSettings | null => {
  if (!isSettingKey(key)) return null;
  if (key === 'mesovortices')
    return value === 'on' || value === 'off' ? { ...settings, mesovortices: value === 'on' } : null;
  if (key === 'intensity') {
    const intensity = Intensity.safeParse(value);
    return intensity.success ? { ...settings, intensity: intensity.data } : null;
  }
  if (key === 'anchor') {
    const anchor = Anchor.safeParse(value);
    return anchor.success ? { ...settings, anchor: anchor.data } : null;
  }
  if (key === 'regime') {
    const regime = Regime.safeParse(value);
    return regime.success ? { ...settings, regime: regime.data } : null;
  }
  const wind = WindChoices.safeParse({ ...settings.wind, [key]: value });
  return wind.success ? { ...settings, wind: wind.data } : null;
};

/** What isn’t at its default, in the order the settings are listed. */
export const departuresOf = (settings: ChainSettings): Setting[] =>
  CHOICES.map(({ key }) => ({ key, value: valueOf(settings, key) })).filter(
    ({ key, value }) => value !== valueOf(DEFAULT_SETTINGS, key),
  );

/** Settings as an address holds them: "profile.holland-2010" for each departure. */
export const writeSettings = (settings: ChainSettings): string[] =>
  departuresOf(settings).map(({ key, value }) => `${key}.${value}`);
/** What an address says of settings; anything unknown stays at its default. */
export const readSettings = (set: readonly string[]): ChainSettings =>
  set.reduce((settings, text) => {
    const dot = text.indexOf('.');
    return withValue(settings, text.slice(0, dot), text.slice(dot + 1)) ?? settings;
  }, DEFAULT_SETTINGS);

/** A departure in words: "Asymmetry from motion: Kepert 2001 boundary layer". */
export const settingText = ({ key, value }: Setting): string => {
  const choice = CHOICES.find((one) => one.key === key)!;
  return `${choice.title}: ${choice.values.find((one) => one.value === value)!.title}`;
};
