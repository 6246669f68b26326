/** Loaded first in every worker thread: tsx's own `--import` hooks only the main one on this version of Node. */
import { register } from 'tsx/esm/api';

register();
