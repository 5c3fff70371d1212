import tailwindcss from '@tailwindcss/vite';
import react from '@vitejs/plugin-react';
import { defineConfig } from 'vite';

// `npm run dev` starts the server beside the client and says here where it listens.
const apiUrl = process.env['LONGPATCH_API_URL'];

export default defineConfig({
  plugins: [react(), tailwindcss()],
  build: { target: 'es2022' },
  server: apiUrl ? { proxy: { '/api': apiUrl } } : {},
});
