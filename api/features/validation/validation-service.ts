import { readFileSync } from 'node:fs';
import { Validation } from '#contract/validation.ts';

const PUBLISHED = new URL('hindcast.json', import.meta.url);

/** The published comparison of modelled with observed gusts; `npm run hindcast` makes it anew. */
export class ValidationService {
  private published: Validation | null = null;

  get(): Validation {
    this.published ??= Validation.parse(JSON.parse(readFileSync(PUBLISHED, 'utf8')));
    return this.published;
  }
}
