import './app/styles.css';
import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { App } from './app/app';
import { applyTheme } from './lib/theme';

applyTheme();

const root = document.getElementById('root');
if (root === null) throw new Error('index.html lost its #root');
createRoot(root).render(
  <StrictMode>
    <App />
  </StrictMode>,
);
