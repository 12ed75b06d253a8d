import type { LocaleMessageDictionary, VueMessageType } from 'vue-i18n';

/** One catalogue file: its top-level keys are the areas it brings (`errors`, `stages`, `outcomes`). */
export type Areas = LocaleMessageDictionary<VueMessageType>;

/** Joins the files of one language. Each top-level key stands in one file only. */
export function mergeAreas(files: Record<string, Areas>): Areas {
  return Object.assign({}, ...Object.values(files)) as Areas;
}
