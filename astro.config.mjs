import { existsSync } from 'node:fs';
import node from '@astrojs/node';
import react from '@astrojs/react';
import tailwindcss from '@tailwindcss/vite';
import { defineConfig, passthroughImageService } from 'astro/config';
import { expressLayer } from './src/integrations/express-layer.mjs';

// The public host is fixed when the server is built: it stands in the same file as the rest of its settings.
if (existsSync('.env')) process.loadEnvFile('.env');

/** Host names whose form posts are accepted; the public one is fixed at build time (see .env.example). */
const publicHost = process.env.APP_PUBLIC_HOST;
const allowedDomains = [
  { hostname: '127.0.0.1' },
  { hostname: 'localhost' },
  ...(publicHost ? [{ hostname: publicHost, protocol: 'https' }] : []),
];

export default defineConfig({
  output: 'server',
  adapter: node({ mode: 'middleware' }),
  integrations: [react(), expressLayer()],
  image: { service: passthroughImageService() },
  security: { checkOrigin: true, allowedDomains },
  experimental: { csp: { algorithm: 'SHA-256' } },
  devToolbar: { enabled: false },
  vite: {
    plugins: [tailwindcss()],
    // Small fonts stay files: the content policy lets none come from a data address.
    build: { assetsInlineLimit: 0 },
    ssr: {
      external: [
        'sequelize',
        'sqlite3',
        'express',
        'express-session',
        'passport',
        'passport-local',
        'connect-session-sequelize',
        'piscina',
        'xlsx',
        'jsdom',
        '@resvg/resvg-js',
        '@node-rs/argon2',
        'nodemailer',
        'pdfmake',
        'umzug',
        'pino',
        'date-holidays',
      ],
    },
  },
});
