import { describeByteSweep } from "./byte-sweep";

describeByteSweep("brackenrow", { backup: { once: 3, lasting: 17 }, run: { once: 23, lasting: 61 }, "put-back": { once: 11, lasting: 41 } }, 2100);
