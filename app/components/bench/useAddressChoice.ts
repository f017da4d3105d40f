import { useCallback } from "react";
import { useSearchParams } from "react-router";

/**
 * A choice that is kept in the address, so that a link shows the same view.
 *
 * @returns the choice and a function that changes it; the usual choice leaves no trace in the address
 */
export function useAddressChoice(name: string, usual: string): [string, (choice: string) => void] {
  const [parameters, setParameters] = useSearchParams();
  const choose = useCallback(
    (choice: string) =>
      setParameters(
        (previous) => {
          const next = new URLSearchParams(previous);
          if (choice === usual) next.delete(name);
          else next.set(name, choice);
          return next;
        },
        { replace: true, preventScrollReset: true },
      ),
    [setParameters, name, usual],
  );
  return [parameters.get(name) ?? usual, choose];
}
