import './app/layers.css';
import '@mantine/core/styles.layer.css';
import '@mantine/dropzone/styles.layer.css';
import '@mantine/notifications/styles.layer.css';
import 'uplot/dist/uPlot.min.css';
import './app/fonts.css';
import './app/tokens.css';
import './app/global.css';
import './app/mantine.css';
import { StrictMode } from 'react';
import { createRoot } from 'react-dom/client';
import { App } from './app/App.js';

createRoot(document.getElementById('root')!).render(
  <StrictMode>
    <App />
  </StrictMode>,
);
