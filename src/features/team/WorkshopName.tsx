import { useEffect, useState } from 'react';
import { errorText } from '../../api/client';
import { useRenameWorkshop } from '../../api/team';
import { Field } from '../../components/Field';
import { Message } from '../../components/Message';

export function WorkshopName({ name }: { name: string }) {
  const rename = useRenameWorkshop();
  const [typed, setTyped] = useState(name);
  useEffect(() => setTyped(name), [name]);
  const wanted = typed.trim();
  return (
    <section aria-labelledby="settings-workshop">
      <form
        className="stack narrow"
        onSubmit={(event) => {
          event.preventDefault();
          if (wanted && wanted !== name) rename.mutate(wanted);
        }}
      >
        <h2 className="h2" id="settings-workshop">
          Workshop
        </h2>
        <Field
          label="Name"
          value={typed}
          maxLength={60}
          error={wanted === '' ? 'The workshop needs a name.' : null}
          onChange={(event) => setTyped(event.target.value)}
        />
        {rename.isError && <Message kind="fault">{errorText(rename.error)}</Message>}
        <p>
          <button type="submit" className="btn" disabled={!wanted || wanted === name || rename.isPending}>
            Rename
          </button>
        </p>
      </form>
    </section>
  );
}
