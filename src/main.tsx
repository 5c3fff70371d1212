import './styles/main.css';
import { createRoot } from 'react-dom/client';
import { z } from 'zod';
import { App } from './app/app.tsx';
import { followTheme } from './lib/theme.ts';

// The content security policy forbids what zod's compiler would do.
z.config({ jitless: true });
followTheme();

const root = document.getElementById('root');
if (root === null) throw new Error('The page has no element with the id root.');
createRoot(root).render(<App />);
