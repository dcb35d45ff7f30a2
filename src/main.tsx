import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { Providers } from './app/providers';
import { applyTheme, storedTheme } from './lib/theme';
import './styles/index.css';

applyTheme(storedTheme());

createRoot(document.getElementById('root') as HTMLElement).render(
  <StrictMode>
    <Providers />
  </StrictMode>,
);
