import { describeByteSweep } from "./byte-sweep";

describeByteSweep("ternwick", { backup: { once: 1, lasting: 5 }, run: { once: 13, lasting: 37 }, "put-back": { once: 9, lasting: 29 } }, 100);
