import { describeByteSweep } from "./byte-sweep";

describeByteSweep("lf8", { backup: { once: 47, lasting: 193 }, run: { once: 401, lasting: 1201 }, "put-back": { once: 301, lasting: 907 } }, 900);
