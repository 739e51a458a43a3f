import './entry.css';

interface ChoiceProps {
  readonly title: string;
  readonly choices: readonly { readonly id: string; readonly label: string; readonly value: string }[];
  readonly choose: (id: string) => void;
  readonly done: () => void;
}

/** One of several, each a key as wide as the glass. */
export function Choice({ title, choices, choose, done }: ChoiceProps) {
  return (
    <main className="entry choice">
      <section className="entry-fields">
        <h1 className="entry-title">{title}</h1>
        {choices.map((choice) => (
          <button key={choice.id} type="button" className="key key-bare entry-choice" onClick={() => choose(choice.id)}>
            <span>{choice.label}</span>
            <span className="quiet">{choice.value}</span>
          </button>
        ))}
      </section>
      <button type="button" className="key entry-back" onClick={done}>
        back
      </button>
    </main>
  );
}
