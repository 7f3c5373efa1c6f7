import { describeByteSweep } from "./byte-sweep";

describeByteSweep("lf8", { backup: { once: 19, lasting: 97 }, run: { once: 149, lasting: 401 }, "put-back": { once: 101, lasting: 307 } }, 100);
