import { toast as show } from 'sonner';

/** A short word about a paper action or a refusal; motion and faults never speak here alone. */
export const toast = (message: string, action?: { label: string; onClick: () => void }): void => {
  show(message, action ? { action } : undefined);
};
