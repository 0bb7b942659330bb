/** The one thing the API tests ask of jsdom, which comes without types: reading a page they fetched. */
declare module 'jsdom' {
  export class JSDOM {
    constructor(html: string);
    readonly window: { readonly document: Document };
  }
}
