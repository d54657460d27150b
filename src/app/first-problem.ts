/** After a form was refused the focus goes to its first complaint, in every form alike. */
export function watchForms(root: Document): () => void {
  const onSubmit = (event: Event) => {
    const form = event.target as HTMLFormElement;
    // The complaints appear when React has drawn them.
    setTimeout(() => form.querySelector<HTMLElement>('[aria-invalid="true"], [data-invalid] input')?.focus(), 50);
  };
  root.addEventListener('submit', onSubmit);
  return () => root.removeEventListener('submit', onSubmit);
}
