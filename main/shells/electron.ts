import { createSession } from '../window/session.ts';
import { startElectron } from './electron-app.ts';

startElectron(createSession);
