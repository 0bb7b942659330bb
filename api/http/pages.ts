import { fileURLToPath } from 'node:url';
import express, { Router, type RequestHandler } from 'express';
import { openApiDocument } from './openapi.ts';

const vendor = (name: string) => fileURLToPath(import.meta.resolve(`swagger-ui-dist/${name}`));

const page = (title: string, head: string, body: string) =>
  `<!doctype html><html lang="en"><head><meta charset="utf-8"><meta name="viewport" content="width=device-width">` +
  `<title>${title}</title>${head}</head><body>${body}</body></html>`;

const DOCS = page(
  'Gustloom API',
  '<link rel="stylesheet" href="/api/docs/swagger-ui.css">',
  '<div id="docs"></div><script src="/api/docs/swagger-ui-bundle.js"></script><script src="/api/docs/init.js"></script>',
);
// The base layout has no vendor's bar; nothing is sent to a validator outside.
const INIT = `window.addEventListener('load', () => {
  SwaggerUIBundle({ url: '/api/v1/openapi.json', dom_id: '#docs', layout: 'BaseLayout', validatorUrl: null,
    presets: [SwaggerUIBundle.presets.apis], deepLinking: true, docExpansion: 'list', defaultModelsExpandDepth: -1 });
});`;

/** The API's description, for machines and for people. */
export const docsPages = (publicUrl: string): Router => {
  const router = Router();
  let document: object | undefined;
  router.get('/api/v1/openapi.json', (_req, res) => {
    document ??= openApiDocument(publicUrl);
    res.json(document);
  });
  router.get('/api/docs', (_req, res) => {
    res.type('html').send(DOCS);
  });
  router.get('/api/docs/init.js', (_req, res) => {
    res.type('text/javascript').send(INIT);
  });
  for (const name of ['swagger-ui.css', 'swagger-ui-bundle.js']) {
    router.get(`/api/docs/${name}`, (_req, res) => res.sendFile(vendor(name), { maxAge: '1d' }));
  }
  return router;
};

const escape = (text: string) => text.replace(/[&<>"']/g, (sign) => `&#${sign.charCodeAt(0)};`);

interface ReceivedLetter {
  at: string;
  from: string;
  to: string[];
  subject: string;
  text: string;
}

/** What the local mail sink received; never mounted in production. */
export const mailPage = (listLetters: () => Promise<ReceivedLetter[]>): Router => {
  const router = Router();
  router.get('/dev/mail', async (_req, res) => {
    const letters = await listLetters();
    const items = letters.map(
      ({ at, from, to, subject, text }) =>
        `<article><h2>${escape(subject)}</h2><p>${escape(at)} · from ${escape(from)} · to ${escape(to.join(', '))}</p>` +
        `<pre>${escape(text)}</pre></article><hr>`,
    );
    const body = items.length > 0 ? items.join('') : '<p>No mail has been sent yet.</p>';
    res
      .set('Cache-Control', 'no-store')
      .type('html')
      .send(page('Mail sent', '', `<main><h1>Mail sent</h1>${body}</main>`));
  });
  return router;
};

/** The built client: hashed files for a year, and its page for every address of its own. */
export const clientPages = (folder: string): RequestHandler[] => [
  express.static(folder, {
    index: false,
    setHeaders: (res, path) => {
      res.setHeader('Cache-Control', path.includes('/assets/') ? 'public, max-age=31536000, immutable' : 'no-cache');
    },
  }),
];
