import { goTheWholePath } from './journey/whole-path';

/** From an empty lab to a block on its rig, as most people do it. */
goTheWholePath('pointer');
