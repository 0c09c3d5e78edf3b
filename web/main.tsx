import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { z } from 'zod';
import { App } from './App.tsx';
import { UnitsProvider } from './units/UnitChoice.tsx';
import './styles/page.css';

// The content-security policy forbids compiling schemas to code; told so, zod does not try.
z.config({ jitless: true });

const root = document.getElementById('root');
if (root === null) throw new Error('index.html must hold an element with the id "root"');
createRoot(root).render(
  <StrictMode>
    <UnitsProvider>
      <App />
    </UnitsProvider>
  </StrictMode>,
);
