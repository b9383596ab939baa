import { goTheWholePath } from './journey/whole-path';

/** The same path with a keyboard and nothing else; at every stop of Tab the focus can be seen. */
goTheWholePath('keyboard');
