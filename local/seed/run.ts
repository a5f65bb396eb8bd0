// Puts the demo workshop into the database that the environment names. A process of its own, because the services
// that it calls read the environment once.
import { seedDemo } from "./seed";

// Without the parent nobody would learn how it went.
process.once("disconnect", () => process.exit(1));
await seedDemo();
process.send?.({ ready: true });
process.exit(0);
