import { App } from './app.ts';

new App(document.body).begin();
