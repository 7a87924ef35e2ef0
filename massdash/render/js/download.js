/* Hands a file made in Python's memory to the person: nothing is written on the server. */
function offer(parcel) {
  const link = document.createElement("a");
  link.href = URL.createObjectURL(new Blob([parcel.data], { type: parcel.mime }));
  link.download = parcel.name;
  document.body.append(link);
  link.click();
  link.remove();
  setTimeout(() => URL.revokeObjectURL(link.href), 60000);
}

function render({ model }) {
  // A page that is drawn again must not download the last file again.
  let last = model.get("parcel").number || 0;
  const arrived = () => {
    const parcel = model.get("parcel");
    if (parcel.number > last) {
      last = parcel.number;
      offer(parcel);
    }
  };
  model.on("change:parcel", arrived);
  return () => model.off("change:parcel", arrived);
}

export default { render };
