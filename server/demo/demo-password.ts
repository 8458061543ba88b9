// The one password of all invented people. Only the demo uses it; a real account never has it.

export const demoPassword = 'lantern-street-2026';
