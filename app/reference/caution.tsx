/** What every reader of results must know. */
export function Caution() {
  return (
    <p className="caution" role="note">
      Results are derived from the model as written. They are not a substitute for testing, for the safety
      standards and codes that apply, or for the judgement of a licensed engineer.
    </p>
  );
}
