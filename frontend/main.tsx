import '@fontsource/noto-sans/latin-400.css';
import '@fontsource/noto-sans/latin-600.css';
import '@fontsource/noto-sans/latin-ext-400.css';
import '@fontsource/noto-sans/latin-ext-600.css';
import '@fontsource/noto-sans/greek-400.css';
import '@fontsource/noto-sans-mono/latin-400.css';
import './styles.css';
import { createRoot } from 'react-dom/client';
import { App } from './app/app.tsx';
import { followScheme } from './lib/scheme.ts';

followScheme(document.documentElement);

const root = document.getElementById('root');
if (!root) throw new Error('index.html has no element with the id "root"');
createRoot(root).render(<App />);
