import { describeByteSweep } from "./byte-sweep";

describeByteSweep("brackenrow", { backup: { once: 1, lasting: 5 }, run: { once: 13, lasting: 37 }, "put-back": { once: 7, lasting: 23 } }, 100);
