/** Fills an empty database with the demo workshop. Called once, when there is no workshop yet. */
export async function seedDemo(): Promise<void> {}
