import { App } from './app.ts';

void new App(document.body).begin();
